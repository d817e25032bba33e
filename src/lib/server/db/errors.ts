import pg from 'pg';
import { badRequest, conflict, Problem, wrongField } from '../problem';

/** Constraint names are the contract between the schema and the sentences. */
const UNIQUE: Record<string, [field: string, sentence: string]> = {
	client_code_unique: ['code', 'is taken. Choose another code.'],
	cell_code_unique: ['code', 'is taken. Choose another code.'],
	fuel_code_unique: ['code', 'is taken. Choose another code.'],
	fuel_batch_code_unique: ['code', 'is taken by another batch of this owner.'],
	limit_set_code_unique: ['code', 'is taken by another limit set of this owner.'],
	limit_set_version_unique: ['version', 'was written meanwhile by someone else. Read the set again.'],
	engine_code_unique: ['code', 'is taken by another engine of this client.'],
	build_number_unique: ['number', 'is taken by another build of this client.'],
	person_email_unique: ['email', 'has an account already.'],
	log_line_superseded_once: ['supersedes', 'has been corrected already.'],
	air_reading_superseded_once: ['supersedes', 'has been corrected already.']
};

export function isViolation(error: unknown, constraint: string): boolean {
	return error instanceof pg.DatabaseError && error.constraint === constraint;
}

/** Turns what the database refused into a problem a person can act on; anything else stays a bug. */
export function problemOf(error: unknown): Problem | null {
	if (error instanceof Problem) return error;
	if (!(error instanceof pg.DatabaseError)) return null;
	switch (error.code) {
		case '23505': {
			const [field, sentence] = UNIQUE[error.constraint ?? ''] ?? ['', ''];
			return field ? new Problem(409, 'Taken', `${field} ${sentence}`, { [field]: sentence }) : null;
		}
		case '23503':
			return badRequest('This names something that does not exist for this client.');
		case '23514':
			return error.constraint?.endsWith('_code_check') || error.constraint === 'build_number_check'
				? wrongField(
						error.constraint === 'build_number_check' ? 'number' : 'code',
						'use capital letters, digits, dots and hyphens, at most 32.'
					)
				: badRequest(`A value is outside what the record allows (${error.constraint}).`);
		case '22003':
			return badRequest('A number is too large to be kept.');
		case '22P05':
		case '22021':
			return badRequest('The text has a character that cannot be kept (NUL).');
		case '57014':
			return new Problem(503, 'Too slow', 'The database took too long. Try again.');
		case '53300':
		case '57P01':
		case '57P03':
			return new Problem(
				503,
				'Away for a moment',
				'The database is not reachable. Nothing was changed; try again.'
			);
		case '40P01':
		case '40001':
			return conflict('Many people changed this at once. Try again.');
		default:
			return null;
	}
}
