import { deserialize } from '$app/forms';
import { callApi } from '$lib/client/api';
import type { DrawnTest } from './entries';
import type { Place } from './clash';

/** What the schedule's move action answers: where the booking stood, and which one carries the new time. */
type Moved = {
	before: Place;
	after: { id: string; number: string; cell: string; from: string; to: string; version: number };
	/** A request to move was made; the slot stands. */
	isAsked: boolean;
};

interface Outcome {
	/** What happened, or why nothing did. */
	sentence: string;
	/** Someone else changed it meanwhile: how it is now has to be read. */
	isStale: boolean;
	/** The booking that carries the new time; absent when nothing happened. */
	moved?: Moved['after'];
	/** Takes it back, and says that it did. */
	undo?: () => Promise<string>;
}

const UNREACHED = 'The server cannot be reached. Nothing was changed; check the network and try again.';

/** Moves a booking to a place on the lab's wall clock, as this person may: at once, or by asking for it. */
export async function moveTo(id: string, test: DrawnTest, place: Place): Promise<Outcome> {
	const body = new FormData();
	for (const [name, value] of Object.entries({ id, version: test.version, ...place }))
		body.set(name, String(value));
	let moved: Moved;
	try {
		const response = await fetch('/schedule?/move', {
			method: 'POST',
			body,
			headers: { accept: 'application/json', 'x-sveltekit-action': 'true' }
		});
		const result = deserialize<Moved, { problem?: string }>(await response.text());
		if (result.type !== 'success' || !result.data) {
			const sentence =
				(result.type === 'failure' ? result.data?.problem : undefined) ?? 'It was not moved. Sign in again.';
			return { sentence: `Not moved. ${sentence}`, isStale: 'status' in result && result.status === 412 };
		}
		moved = result.data;
	} catch {
		return { sentence: `Not moved. ${UNREACHED}`, isStale: false };
	}
	const { after, before, isAsked } = moved;
	return {
		sentence: isAsked
			? `${after.number} asks to move ${test.number}. ${test.number} stands until a manager confirms it.`
			: `${after.number} is moved.`,
		isStale: false,
		moved: after,
		undo: async () => {
			if (isAsked) {
				await callApi(`/bookings/${after.id}/cancel`, { method: 'POST', body: {}, ifMatch: after.version });
				return `${after.number} is withdrawn. ${test.number} stands as it was.`;
			}
			await callApi(`/bookings/${after.id}`, { method: 'PATCH', body: before, ifMatch: after.version });
			return `${after.number} stands where it stood.`;
		}
	};
}
