import type { Deps } from '../deps';
import { addBookings, addClosures } from './bookings';
import { DEMO_PASSWORD } from './lab/people';
import { addClients, addEngines, addLab } from './masters';
import { addCustomers, addStaff, castOf } from './people';
import { alone, markBegun, markComplete, readProgress } from './progress';
import { reviewRuns, sendRuns } from './runs';

export { DEMO_PASSWORD } from './lab/people';

/** How long the seed waits for figures before it leaves the reviews to its next start. */
const PATIENCE_MS = 180_000;

export interface SeedOptions {
	/** One line of progress. */
	say?: (line: string) => void;
	patienceMs?: number;
}

/** How it ended: `waiting` and `busy` are to be started again later. */
export type Seeded = 'complete' | 'already complete' | 'waiting' | 'busy' | 'other lab';

/**
 * Fills an empty laboratory with the invented one, through the same use cases as its people would, or goes on where a killed
 * seed stopped. A laboratory with clients of its own is left alone.
 */
export async function seedDemoLab(
	deps: Deps,
	{ say = () => {}, patienceMs = PATIENCE_MS }: SeedOptions = {}
): Promise<Seeded> {
	const ended = await alone(deps, () => seed(deps, say, patienceMs));
	if (ended === null) say('Demo lab: another process is filling it in.');
	return ended ?? 'busy';
}

async function seed(deps: Deps, say: (line: string) => void, patienceMs: number): Promise<Seeded> {
	const progress = await readProgress(deps);
	if (progress.is === 'complete') {
		say('Demo lab: complete already, nothing added.');
		return 'already complete';
	}
	if (progress.is === 'other') {
		say('Demo lab: this laboratory has clients of its own, so nothing is added.');
		return 'other lab';
	}
	const begun = progress.is === 'begun' ? progress.at : deps.now();
	if (progress.is === 'begun') say('Demo lab: going on where an earlier start stopped.');
	else await markBegun(deps, begun);

	await addStaff(deps);
	await addClients(deps, await castOf(deps));
	await addCustomers(deps);
	const cast = await castOf(deps);
	await addLab(deps, cast);
	await addEngines(deps, cast);
	say('Demo lab: people, cells, fuels, limits, engines and builds are in.');
	await addClosures(deps, cast, begun);
	const bookings = await addBookings(deps, cast, begun);
	say('Demo lab: a year of bookings is in.');
	const seeding = { deps, cast, begun, bookings, say };
	const sent = await sendRuns(seeding);
	const left = await reviewRuns(seeding, sent, patienceMs);
	if (left > 0) {
		say(
			`Demo lab: ${left} traces have no figures yet, so their runs are not reviewed. Is the worker running? The next start goes on.`
		);
		return 'waiting';
	}
	await markComplete(deps);
	say(`Demo lab: complete. Sign in as engineer@fellmoor.example with the password “${DEMO_PASSWORD}”.`);
	return 'complete';
}
