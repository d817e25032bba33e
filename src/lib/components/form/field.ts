import type { Snippet } from 'svelte';

/** What every form field takes beside its own input's attributes. */
export interface FieldProps {
	label: string;
	/** Said before the error, when something about the answer is not obvious. */
	hint?: string | undefined;
	/** From the server or the schema; the first is shown. What was typed stays. */
	errors?: readonly string[] | string | undefined;
	/** Marked in words; a field is required unless it says so. */
	optional?: boolean;
}

/** What the input itself must carry to belong to its label, hint and error. */
interface FieldAria {
	id: string;
	'aria-describedby': string | undefined;
	'aria-invalid': 'true' | undefined;
	'aria-required': 'true' | undefined;
}

export interface FieldShell extends FieldProps {
	/** Shown inside the field at the right: `kPa`, `rev/min`. */
	unit?: string | undefined;
	input: Snippet<[FieldAria]>;
}

export function firstError(errors: FieldProps['errors']): string | undefined {
	return typeof errors === 'string' ? errors || undefined : errors?.[0];
}
