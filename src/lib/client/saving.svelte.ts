import { ApiError } from './problem';

/** A form that goes through the API: at work or not, and what was refused, each sentence at its field. */
export class Saving {
	busy = $state(false);
	errors: Record<string, string[]> = $state.raw({});
	/** What belongs to no field. */
	refusal: string[] = $state.raw([]);

	/** Runs `work` once at a time; what was typed stays whatever comes of it. @param fields the names that have a place of their own */
	async run(work: () => Promise<unknown>, fields: readonly string[]): Promise<boolean> {
		if (this.busy) return false;
		this.busy = true;
		this.errors = {};
		this.refusal = [];
		try {
			await work();
			return true;
		} catch (cause) {
			const told = cause instanceof ApiError ? cause.fields : [];
			const placed = told.filter(({ field }) => fields.includes(field));
			this.errors = Object.fromEntries(placed.map(({ field, message }) => [field, [capitalised(message)]]));
			if (placed.length === 0)
				this.refusal = [cause instanceof Error ? cause.message : 'This was not saved.'];
			return false;
		} finally {
			this.busy = false;
		}
	}
}

/** The API puts the field's name before the sentence; at the field itself it begins one. */
const capitalised = (sentence: string) => sentence.charAt(0).toUpperCase() + sentence.slice(1);
