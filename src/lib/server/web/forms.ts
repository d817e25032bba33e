import { fail } from '@sveltejs/kit';
import { setError, type SuperValidated } from 'sveltekit-superforms';
import { problemOf } from '../db';

/**
 * A use case's refusal as the form's own errors: each sentence at its field, what was typed kept.
 * @param fieldOf names of the use case's fields that are called otherwise in the form
 */
export function refused<T extends Record<string, unknown>>(
	form: SuperValidated<T>,
	cause: unknown,
	fieldOf: Record<string, string> = {}
) {
	const problem = problemOf(cause);
	if (!problem) throw cause;
	const placed = Object.entries(problem.fields).filter(([field]) => (fieldOf[field] ?? field) in form.data);
	for (const [field, sentence] of placed)
		setError(form, (fieldOf[field] ?? field) as never, capitalised(sentence));
	// A sentence that belongs to no field of this form stands above it.
	if (!placed.length) setError(form, '' as never, problem.message);
	return fail(problem.status, { form });
}

/** The API puts the field's name before the sentence; at the field itself it begins one. */
const capitalised = (sentence: string) => sentence.charAt(0).toUpperCase() + sentence.slice(1);
