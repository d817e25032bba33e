import type { RunKind } from '$lib/domain/model';
import type { Moment } from '../calendar';

type Asker = 'client' | 'engineer' | 'manager';

/** What became of a request. */
type Fate =
	| { is: 'requested' }
	| { is: 'confirmed' }
	/** Confirmed, and a request of its client to have it at another time waits. */
	| { is: 'confirmed'; wished: { from: Moment; to: Moment } }
	/** Confirmed at another time than asked for, then moved by the manager to where it is. */
	| { is: 'moved'; first: { from: Moment; to: Moment } }
	| { is: 'declined'; reason: string }
	/** After it was confirmed, or as a request that nobody had answered. */
	| { is: 'cancelled'; by: 'client' | 'manager'; reason: string; confirmed: boolean };

export interface DemoBooking {
	/** Names it for the runs in it. */
	key: string;
	client: string;
	build: string;
	cell: string;
	/** Null where nobody has named the fuel yet. */
	batch: string | null;
	kind: RunKind;
	purpose: string;
	from: Moment;
	to: Moment;
	askedBy: Asker;
	fate: Fate;
}
