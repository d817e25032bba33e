import type { RunGuess } from '$lib/domain/analysis/guess-run';
import { RUN_KIND_WORDS } from '$lib/domain/display/words';
import type { RunKind } from '$lib/domain/model';

interface Known {
	start: {
		booking: { number: string } | null;
		from: { kind: 'booking' | 'own' | 'lab'; number: string } | null;
	};
	guess: RunGuess | null;
	kind: RunKind;
	startedAt: string;
	/** Where the start comes from: the file, the clock at this moment, or the person. */
	startFrom: 'file' | 'now' | 'person';
	/** As the form has them now; empty where nothing is chosen. */
	build: string;
	cell: string;
	batch: string;
}

const FROM = {
	booking: (number: string) => `as booked in ${number}`,
	own: (number: string) => `as in your last run, ${number}`,
	lab: (number: string) => `as in the lab’s last run, ${number}`
};

/** What a record will be opened with, and how each was come by. */
export function startWords({
	start,
	guess,
	kind,
	startedAt,
	startFrom,
	build,
	cell,
	batch
}: Known): string[] {
	const { from } = start;
	const chosen = [
		...(build ? [`Build ${build}`] : []),
		...(cell ? [`cell ${cell}`] : []),
		...(batch ? [`fuel batch ${batch}`] : [])
	].join(', ');
	const source = from ? `, ${FROM[from.kind](from.number)}` : '';
	const told = guess?.kind?.value === kind ? guess.kind.why : null;
	const startTold = {
		file: 'from the file’s time stamps',
		now: 'now, since the file names no day that can be told',
		person: 'as you set it'
	}[startFrom];
	return [
		...(chosen ? [`${chosen}${source}. Change it below if this run is another.`] : []),
		told
			? `${RUN_KIND_WORDS[kind]}: ${told}.`
			: `${RUN_KIND_WORDS[kind]}${guess ? ': the file does not tell, so look at the kind' : ''}.`,
		`Start ${startedAt.replace('T', ', ')}, ${startTold}.`
	];
}
