import type { Finding, FlagSeverity } from '$lib/domain/model';

/** A state is told by word and shape; colour only repeats it. */
export type Shape = 'ring' | 'disc' | 'tick' | 'struck' | 'triangle' | 'octagon' | 'dots';
export type Tone = 'plain' | 'accent' | 'good' | 'attention' | 'limit' | 'muted';

export interface Status {
	word: string;
	shape: Shape;
	tone: Tone;
}

const of = (word: string, shape: Shape, tone: Tone): Status => ({ word, shape, tone });

const STATUSES = {
	run: {
		open: of('Open', 'ring', 'accent'),
		closed: of('Closed', 'disc', 'plain'),
		accepted: of('Accepted', 'tick', 'good'),
		voided: of('Voided', 'struck', 'muted')
	},
	build: {
		in_preparation: of('In preparation', 'ring', 'attention'),
		ready: of('Ready', 'tick', 'good'),
		retired: of('Retired', 'struck', 'muted')
	},
	booking: {
		requested: of('Requested', 'ring', 'attention'),
		confirmed: of('Confirmed', 'disc', 'accent'),
		declined: of('Declined', 'struck', 'muted'),
		cancelled: of('Cancelled', 'struck', 'muted'),
		done: of('Done', 'tick', 'plain')
	},
	trace: {
		received: of('Received', 'ring', 'plain'),
		processing: of('Being read', 'dots', 'accent'),
		needs_map: of('Needs a channel map', 'triangle', 'attention'),
		ready: of('Ready', 'tick', 'good'),
		refused: of('Refused', 'octagon', 'limit')
	},
	flag: {
		note: of('Note', 'ring', 'plain'),
		review: of('Review', 'triangle', 'attention'),
		breach: of('Breach', 'octagon', 'limit')
	} satisfies Record<FlagSeverity, Status>,
	person: {
		active: of('Active', 'tick', 'good'),
		invited: of('Invited', 'ring', 'attention'),
		disabled: of('Disabled', 'struck', 'muted')
	},
	finding: {
		info: of('Note', 'ring', 'plain'),
		warning: of('Look at this', 'triangle', 'attention'),
		error: of('Wrong', 'octagon', 'limit')
	} satisfies Record<Finding['severity'], Status>
} as const;

export type StatusKind = keyof typeof STATUSES;

/** How a state is shown; one that is not known here is shown by its own name rather than hidden. */
export function statusOf(kind: StatusKind, state: string): Status {
	const known: Readonly<Record<string, Status>> = STATUSES[kind];
	return known[state] ?? of(state.replaceAll('_', ' '), 'ring', 'plain');
}
