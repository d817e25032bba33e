import { parseArgs } from 'node:util';
import { ROLES, type Role } from './lib/server/access';
import { addPerson, createTokenFor } from './lib/server/auth';
import { readConfig } from './lib/server/config';
import { closeDeps, openDeps } from './lib/server/deps';
import { inviteFromCommandLine } from './lib/server/people';
import { Problem } from './lib/server/problem';
import { recomputeAll } from './lib/server/traces';

const USAGE = `Usage:
  npm run admin -- user add --email E --name N --role R [--client CODE]   password: from TRUNNION_PASSWORD, or asked for on standard input
  npm run admin -- user add … --invite                                    no password: a mail invites the person to choose one
  npm run admin -- token add --email E --label L                          prints the token alone
  npm run admin -- recompute                                              makes every run's figures again from its original
Roles: ${ROLES.join(', ')}.`;

async function readPassword(): Promise<string> {
	if (process.env.TRUNNION_PASSWORD) return process.env.TRUNNION_PASSWORD;
	if (process.stdin.isTTY) process.stderr.write('Password for the new person: ');
	process.stdin.setEncoding('utf8');
	for await (const chunk of process.stdin) return String(chunk).split('\n')[0]!.replace(/\r$/, '');
	return '';
}

const { values, positionals } = parseArgs({
	allowPositionals: true,
	options: {
		email: { type: 'string' },
		name: { type: 'string' },
		role: { type: 'string' },
		client: { type: 'string' },
		label: { type: 'string' },
		invite: { type: 'boolean', default: false }
	}
});

const deps = openDeps(readConfig(process.env), 2);
try {
	switch (positionals.join(' ')) {
		case 'user add': {
			if (!values.email || !values.name || !ROLES.includes(values.role as Role)) throw new Error(USAGE);
			const person = { email: values.email, name: values.name, role: values.role as Role };
			if (values.invite) {
				await inviteFromCommandLine(deps, { ...person, client: values.client });
				console.log(`A mail to ${values.email} is on its way; it lets them choose a password.`);
				break;
			}
			await addPerson(deps, { ...person, clientCode: values.client, password: await readPassword() });
			console.log(`${values.email} may sign in as ${values.role}.`);
			break;
		}
		case 'token add':
			if (!values.email || !values.label) throw new Error(USAGE);
			console.log(await createTokenFor(deps, values.email, values.label));
			break;
		case 'recompute':
			console.log(`${await recomputeAll(deps)} traces are queued to be computed again.`);
			break;
		default:
			throw new Error(USAGE);
	}
} catch (error) {
	console.error(error instanceof Problem || error instanceof Error ? error.message : error);
	process.exitCode = 1;
} finally {
	await closeDeps(deps);
}
