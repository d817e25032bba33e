import { readdirSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { ACTIONS, ROLES, type Action, type Role } from '../../../src/lib/server/access';
import { useStack } from '../../setup/stack';
import {
	ABSENT,
	blind,
	CANARY,
	makeAccessLab,
	PASSWORD,
	type AccessLab,
	type Answer,
	type Things
} from './lab';

/** Every page and every form action × every role × own, foreign and absent ids. A new page fails here until it is told below. */
const stack = useStack();
let lab: AccessLab;
const cookies = {} as Record<Role, string>;

const ROUTES = new URL('../../../src/routes/', import.meta.url);
const pages = readdirSync(ROUTES, { recursive: true, encoding: 'utf8' })
	.filter((file) => file.endsWith('+page.server.ts'))
	.map((file) => '/' + file.replaceAll('\\', '/').replace(/\/?\+page\.server\.ts$/, ''))
	.sort();

/** Who may read each page, what its id is, and who may do each of its actions. */
interface Told {
	read: Action | null;
	/** What the id in its address names, of a client. */
	id?: keyof Things;
	/** What it names, of the lab: nothing is foreign there. */
	labs?: 'cell' | 'fuel';
	actions?: Record<string, Action>;
}
const TOLD: Record<string, Told> = {
	'/': { read: null },
	'/sign-in': { read: null },
	'/forgotten': { read: null },
	'/invitation/[token]': { read: null },
	'/reset/[token]': { read: null },
	'/account': {
		read: 'account.own',
		actions: {
			create: 'account.own',
			revoke: 'account.own',
			me: 'account.own',
			password: 'account.own',
			end: 'account.own'
		}
	},
	'/bookings': { read: 'booking.read' },
	'/bookings/[id]': {
		read: 'booking.read',
		id: 'booking',
		actions: {
			confirm: 'booking.decide',
			decline: 'booking.decide',
			cancel: 'booking.cancel',
			move: 'booking.move'
		}
	},
	'/bookings/new': {
		read: 'booking.request',
		actions: { fit: 'booking.request', request: 'booking.request' }
	},
	'/builds': { read: 'engine.read' },
	'/builds/[id]': {
		read: 'engine.read',
		id: 'build',
		actions: { state: 'build.write', follow: 'build.follow', unfollow: 'build.follow' }
	},
	'/builds/[id]/edit': { read: 'build.write', id: 'build', actions: { default: 'build.write' } },
	'/builds/engines': { read: 'engine.read' },
	'/builds/engines/[id]': {
		read: 'engine.read',
		id: 'engine',
		actions: { recompute: 'engine.write' }
	},
	'/builds/engines/[id]/edit': { read: 'engine.write', id: 'engine', actions: { default: 'engine.write' } },
	'/builds/engines/new': { read: 'engine.write', actions: { default: 'engine.write' } },
	'/builds/new': { read: 'build.write', actions: { default: 'build.write' } },
	'/lab': { read: null },
	'/lab/cells': { read: 'lab.read' },
	'/lab/cells/[code]': {
		read: 'lab.read',
		labs: 'cell',
		actions: { close: 'closure.write', open: 'closure.write', recompute: 'cell.write' }
	},
	'/lab/cells/[code]/edit': { read: 'cell.write', labs: 'cell', actions: { default: 'cell.write' } },
	'/lab/cells/[code]/torque-chain/new': {
		read: 'cell.write',
		labs: 'cell',
		actions: { default: 'cell.write' }
	},
	'/lab/cells/new': { read: 'cell.write', actions: { default: 'cell.write' } },
	'/lab/clients': { read: 'client.read', actions: { default: 'client.create' } },
	'/lab/fuels': { read: 'lab.read' },
	'/lab/fuels/[id]': { read: 'lab.read', labs: 'fuel' },
	'/lab/fuels/[id]/edit': { read: 'fuel.write', labs: 'fuel', actions: { default: 'fuel.write' } },
	'/lab/fuels/batches/[id]': { read: 'lab.read', id: 'batch', actions: { recompute: 'fuel.write' } },
	'/lab/fuels/batches/[id]/edit': { read: 'fuel.write', id: 'batch', actions: { default: 'fuel.write' } },
	'/lab/fuels/batches/new': { read: 'fuel.write', actions: { default: 'fuel.write' } },
	'/lab/fuels/new': { read: 'fuel.write', actions: { default: 'fuel.write' } },
	'/lab/limits': { read: 'lab.read' },
	'/lab/audit': { read: 'audit.read' },
	'/lab/people': { read: 'person.admin' },
	'/lab/people/[id]': {
		read: 'person.admin',
		id: 'person',
		actions: {
			change: 'person.admin',
			invite: 'person.admin',
			disable: 'person.admin',
			enable: 'person.admin',
			end: 'person.admin'
		}
	},
	'/lab/people/new': { read: 'person.admin', actions: { default: 'person.admin' } },
	'/lab/limits/[code]': { read: 'lab.read', id: 'limitSet' },
	'/lab/limits/[code]/new-version': {
		read: 'limits.write',
		id: 'limitSet',
		actions: { default: 'limits.write' }
	},
	'/lab/limits/new': { read: 'limits.write', actions: { default: 'limits.write' } },
	'/runs': { read: 'run.read' },
	'/runs/[id]': {
		read: 'run.read',
		id: 'run',
		actions: {
			close: 'run.open',
			accept: 'run.review',
			void: 'run.review',
			flag: 'run.flag',
			log: 'run.log',
			follow: 'build.follow',
			unfollow: 'build.follow'
		}
	},
	'/runs/new': { read: 'run.open', actions: { open: 'run.open', prepare: 'engine.write' } },
	'/today': { read: 'schedule.read' },
	'/schedule': { read: 'schedule.read', actions: { move: 'booking.move' } },
	'/schedule/close': { read: 'closure.write', actions: { default: 'closure.write' } },
	'/trends': { read: 'trend.read' }
};

/** Answer before anyone is known. */
const OPEN = new Set(['/sign-in', '/forgotten', '/invitation/[token]', '/reset/[token]']);

async function ask(
	cookie: string | null,
	path: string,
	form?: Record<string, string>,
	headers: Record<string, string> = {}
): Promise<Answer & { location: string | null }> {
	const response = await fetch(stack.current.origin + path, {
		method: form ? 'POST' : 'GET',
		redirect: 'manual',
		headers: {
			accept: 'text/html',
			...(cookie ? { cookie } : {}),
			...(form
				? {
						origin: stack.current.origin,
						'sec-fetch-site': 'same-origin',
						'content-type': 'application/x-www-form-urlencoded'
					}
				: {}),
			...headers
		},
		...(form ? { body: new URLSearchParams(form).toString() } : {})
	});
	// A page names its own nonce and its request; nothing else may differ.
	const text = (await response.text())
		.replace(/nonce="[^"]*"/g, 'nonce="…"')
		.replaceAll(response.headers.get('x-request-id') ?? 'no request id', '…');
	return { status: response.status, text, location: response.headers.get('location') };
}

async function signIn(email: string): Promise<string> {
	const response = await fetch(`${stack.current.origin}/sign-in`, {
		method: 'POST',
		redirect: 'manual',
		headers: {
			origin: stack.current.origin,
			accept: 'text/html',
			'content-type': 'application/x-www-form-urlencoded'
		},
		body: new URLSearchParams({ email, password: PASSWORD }).toString()
	});
	const cookie = response.headers.get('set-cookie')?.split(';')[0];
	if (response.status !== 303 || !cookie)
		throw new Error(`${email} could not sign in: ${response.status} ${await response.text()}`);
	return cookie;
}

beforeAll(async () => {
	lab = await makeAccessLab(stack.current);
	for (const role of ROLES)
		cookies[role] = await signIn(role === 'client' ? 'client@aa.example' : `${role}@lab.example`);
});

const withId = (page: string, id: string) => page.replace(/\[(id|code)\]/, id);
const ownId = ({ id, labs }: Told) => (id ? lab.own[id] : labs ? lab[labs] : '');
const may = (role: Role, action: Action) => (ACTIONS[action].roles as readonly Role[]).includes(role);

describe('every page', () => {
	it('is told above, and nothing is told that is not there', () => {
		expect(pages).toEqual(Object.keys(TOLD).sort());
	});

	it('sends nobody to the sign-in, by page and by its data', async () => {
		for (const page of pages.filter((each) => !OPEN.has(each)))
			for (const path of [
				withId(page, lab.own.run),
				`${withId(page, lab.own.run)}/__data.json`.replace('//', '/')
			]) {
				const answer = await ask(null, path);
				expect(`${answer.location} ${answer.text}`, path).toContain('/sign-in');
				expect(answer.text, path).not.toMatch(/OWN|CANARY/);
			}
	});

	it('opens to those who may and to no one else', async () => {
		for (const [page, told] of Object.entries(TOLD)) {
			if (!told.read) continue;
			for (const role of ROLES) {
				const answer = await ask(cookies[role], withId(page, ownId(told)));
				expect(answer.status, `${role} ${page}: ${answer.text.slice(0, 200)}`).toBe(
					may(role, told.read) ? 200 : 403
				);
			}
		}
	});

	it('shows a client a rival’s thing as it shows none', async () => {
		for (const [page, told] of Object.entries(TOLD)) {
			if (!told.id) continue;
			for (const suffix of ['', '/__data.json']) {
				const foreign = await ask(cookies.client, withId(page, lab.foreign[told.id]) + suffix);
				const absent = await ask(cookies.client, withId(page, ABSENT) + suffix);
				expect(blind(foreign, lab.foreign[told.id], lab.foreign[told.id].slice(0, 60)), page).toBe(
					blind(absent, ABSENT)
				);
				expect(foreign.text, page).not.toContain(CANARY);
				const isClosed = told.read !== null && !may('client', told.read);
				if (!suffix) expect(foreign.status, page).toBe(isClosed ? 403 : 404);
			}
		}
	});

	it('holds nothing of a rival on any page that a client may open', async () => {
		for (const [page, told] of Object.entries(TOLD)) {
			const answer = await ask(cookies.client, withId(page, ownId(told)));
			expect(answer.text, page).not.toMatch(new RegExp(`${CANARY}|BB-[RB]-`));
		}
	});

	it('refuses each action to those who never may, and a rival’s thing as an absent one', async () => {
		let asked = 0;
		for (const [page, told] of Object.entries(TOLD))
			for (const [name, action] of Object.entries(told.actions ?? {})) {
				const suffix = name === 'default' ? '' : `?/${name}`;
				for (const role of ROLES.filter((each) => !may(each, action))) {
					const answer = await ask(cookies[role], withId(page, ownId(told)) + suffix, {
						reason: 'x',
						text: 'x',
						state: 'ready'
					});
					expect(answer.status, `${role} ${page}${suffix}`).toBe(403);
					asked++;
				}
				const nobody = await ask(null, withId(page, ownId(told)) + suffix, {
					reason: 'x'
				});
				expect(nobody.status, `nobody ${page}${suffix}`).toBe(303);
				if (!told.id || !may('client', action)) continue;
				const form = {
					reason: 'x',
					text: 'x',
					from: '2031-03-01T08:00',
					to: '2031-03-01T09:00',
					cell: lab.cell
				};
				const foreign = await ask(cookies.client, withId(page, lab.foreign[told.id]) + suffix, form);
				const absent = await ask(cookies.client, withId(page, ABSENT) + suffix, form);
				expect(foreign.status, `${page}${suffix}`).toBe(404);
				expect(blind(foreign, lab.foreign[told.id])).toBe(blind(absent, ABSENT));
			}
		expect(asked).toBeGreaterThan(20);
	});

	it('refuses what another site makes a browser send', async () => {
		for (const headers of [
			{ origin: 'https://elsewhere.example' },
			{ 'sec-fetch-site': 'cross-site' }
		] as Record<string, string>[]) {
			const page = await ask(cookies.manager, '/lab/clients', { code: 'ZZ', name: 'Z' }, headers);
			expect(page.status).toBe(403);
			const api = await fetch(`${stack.current.origin}/api/v1/clients`, {
				method: 'POST',
				headers: { cookie: cookies.manager, 'content-type': 'application/json', ...headers },
				body: '{"code":"ZZ","name":"Z"}'
			});
			expect(api.status).toBe(403);
		}
	});
});
