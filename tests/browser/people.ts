import type { Role } from '../../src/lib/server/access';
import { addPerson, createTokenFor } from '../../src/lib/server/auth';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import type { Stack } from '../setup/stack';

export const PASSWORD = 'a sentence nobody guesses';

interface Wanted {
	email: string;
	name: string;
	role: Role;
	clientCode?: string;
}
type Thing = { id: string; number: string };
/** Makes something through the API as one person. */
export type Maker = (path: string, body: unknown) => Promise<Thing>;

/** Adds someone who can sign in, and lets the test make things as them. */
export async function addMaker(stack: Stack, person: Wanted): Promise<Maker> {
	const deps = openDeps(readConfig({ ...process.env, ...stack.env }), 1);
	try {
		await addPerson(deps, { ...person, password: PASSWORD });
		const token = await createTokenFor(deps, person.email, 'test');
		return async (path, body) => {
			const response = await fetch(`${stack.origin}/api/v1${path}`, {
				method: 'POST',
				headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
				body: JSON.stringify(body)
			});
			if (!response.ok) throw new Error(`${path}: ${response.status} ${await response.text()}`);
			return (await response.json()) as Thing;
		};
	} finally {
		await closeDeps(deps);
	}
}
