import { instantsAt } from '$lib/domain/time';
import type { Config } from '../config';
import { wrongField } from '../problem';

/** The instant that a `datetime-local` field means on the lab's clock. @throws Problem 400 for an hour that a clock change leaves out */
export function labInstant(config: Config, local: string, field: string): Date {
	// Of two in an autumn overlap the first is meant; people who mean the second can say so through the API.
	const [instant] = instantsAt(local, config.labTimeZone);
	if (!instant)
		throw wrongField(field, `the clock of ${config.labTimeZone} never shows this time. Choose another.`);
	return instant;
}
