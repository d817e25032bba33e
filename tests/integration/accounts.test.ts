import { beforeAll, describe, expect, it } from 'vitest';
import { linkIn, PASSWORD, useAccountsLab, type Answer } from './accounts-lab';

/** Invitation, reset and the administration of people, as they pass through the built server, its worker and the mail. */
const lab = useAccountsLab();
let admin: { id: string; email: string; token: string };

beforeAll(async () => {
	admin = await lab.person('admin');
});

const chosen = (password: string) => ({ password, again: password });
const counted = (answers: Answer[]) => {
	const won = answers.filter(({ status }) => status === 303);
	const lost = answers.filter(({ status }) => status === 410 || status === 429);
	return { won: won.length, lost: lost.length };
};

async function invited(email: string, more: object = {}) {
	const answer = await lab.api(admin.token, 'POST', '/people', {
		email,
		name: 'Ines Marlow',
		role: 'engineer',
		...more
	});
	expect(answer.status, answer.text).toBe(201);
	return JSON.parse(answer.text) as { id: string; state: string };
}

async function asked(email: string, count: number) {
	const answer = await lab.browse('/forgotten', { email });
	expect(answer.status, answer.text.slice(0, 300)).toBe(200);
	return linkIn((await lab.mailsTo(email, count)).at(-1)!);
}

describe('an invitation', () => {
	it('lets exactly one of fifty simultaneous uses choose the password', async () => {
		const email = 'ines@fellmoor.example';
		const { id, state } = await invited(email);
		expect(state).toBe('invited');
		const [mail] = await lab.mailsTo(email, 1);
		expect(mail!.text).toContain('Role: engineer');
		const { path } = linkIn(mail!);
		const tries = Array.from({ length: 50 }, (_, n) => `the password of try ${n}`);
		const answers = await Promise.all(tries.map((password) => lab.browse(path, chosen(password))));
		expect(counted(answers)).toEqual({ won: 1, lost: 49 });
		const winner = tries[answers.findIndex(({ status }) => status === 303)]!;
		expect(await lab.signIn(email, winner)).not.toBeNull();
		expect(
			await lab.signIn(
				email,
				tries.find((each) => each !== winner)
			)
		).toBeNull();
		expect(await lab.sql('select 1 from auth.password where person_id = $1', [id])).toHaveLength(1);
	});

	it('is used up by the form alone, and its page tells no other page where it was', async () => {
		const email = 'noel@fellmoor.example';
		await invited(email);
		const { path } = linkIn((await lab.mailsTo(email, 1))[0]!);
		for (let look = 0; look < 3; look++) {
			const page = await lab.browse(path);
			expect(page.status).toBe(200);
			expect(page.text).toContain(email);
			expect(page.headers.get('referrer-policy')).toBe('no-referrer');
			expect(page.headers.get('cache-control')).toContain('no-store');
		}
		const poor = await lab.browse(path, chosen('short'));
		expect(poor.status).toBe(400);
		expect(poor.text).toContain('Use at least 10 characters');
		expect((await lab.browse(path, chosen(PASSWORD))).location).toBe('/sign-in?done=password');
		const spent = await lab.browse(path);
		expect(spent.text).toContain('This link works no more');
		expect(spent.text).not.toContain(email);
	});

	it('is replaced by a later one, and void when the account is disabled', async () => {
		const email = 'ravi@fellmoor.example';
		const { id } = await invited(email);
		const first = linkIn((await lab.mailsTo(email, 1))[0]!);
		expect((await lab.api(admin.token, 'POST', `/people/${id}/invite`)).status).toBe(200);
		const second = linkIn((await lab.mailsTo(email, 2))[1]!);
		expect((await lab.browse(first.path, chosen(PASSWORD))).status).toBe(410);
		expect((await lab.api(admin.token, 'POST', `/people/${id}/disable`, {})).status).toBe(200);
		expect((await lab.browse(second.path, chosen(PASSWORD))).status).toBe(410);
		expect((await lab.api(admin.token, 'POST', `/people/${id}/enable`)).status).toBe(200);
		expect((await lab.browse(second.path, chosen(PASSWORD))).status).toBe(410);
	});
});

describe('a reset', () => {
	it('lets exactly one of fifty simultaneous uses set the password, and ends every session', async () => {
		const person = await lab.person('engineer');
		const cookie = (await lab.signIn(person.email))!;
		expect((await lab.browse('/account', undefined, cookie)).status).toBe(200);
		const { path } = await asked(person.email, 1);
		const tries = Array.from({ length: 50 }, (_, n) => `another password of try ${n}`);
		const answers = await Promise.all(tries.map((password) => lab.browse(path, chosen(password))));
		expect(counted(answers)).toEqual({ won: 1, lost: 49 });
		expect((await lab.browse('/account', undefined, cookie)).location).toContain('/sign-in');
		expect(await lab.signIn(person.email)).toBeNull();
		const winner = tries[answers.findIndex(({ status }) => status === 303)]!;
		expect(await lab.signIn(person.email, winner)).not.toBeNull();
		const [, changed] = await lab.mailsTo(person.email, 2);
		expect(changed!.subject).toContain('was changed');
	});

	it('is void once a newer one is sent, once it is too old, and once the password is changed', async () => {
		const person = await lab.person('builder');
		const first = await asked(person.email, 1);
		const second = await asked(person.email, 2);
		expect((await lab.browse(first.path, chosen(PASSWORD))).status).toBe(410);
		await lab.sql(`update auth.reset set expires_at = now() - interval '1 second' where person_id = $1`, [
			person.id
		]);
		expect((await lab.browse(second.path, chosen(PASSWORD))).status).toBe(410);
		const third = await asked(person.email, 3);
		const changed = await lab.api(person.token, 'POST', '/me/password', {
			old: PASSWORD,
			new: 'quite another sentence'
		});
		expect(changed.status, changed.text).toBe(204);
		expect((await lab.browse(third.path, chosen(PASSWORD))).status).toBe(410);
		expect(await lab.signIn(person.email, 'quite another sentence')).not.toBeNull();
	});

	it('works for an hour at most and leaves its secret in no table, no job and no log', async () => {
		const person = await lab.person('operator');
		const { path, secret } = await asked(person.email, 1);
		const [row] = await lab.sql<{ minutes: number }>(
			'select extract(epoch from expires_at - created_at)::float / 60 as minutes from auth.reset where person_id = $1',
			[person.id]
		);
		expect(row!.minutes).toBeGreaterThanOrEqual(30);
		expect(row!.minutes).toBeLessThanOrEqual(60);
		await lab.browse(path);
		await lab.browse(path, chosen('x'));
		const kept = await lab.sql<{ text: string }>(
			`select (select string_agg(m::text, ' ') from mail m) || ' ' ||
				coalesce((select string_agg(j.payload::text, ' ') from graphile_worker._private_jobs j), '') || ' ' ||
				(select string_agg(r::text, ' ') from auth.reset r) || ' ' ||
				coalesce((select string_agg(a::text, ' ') from audit a), '') as text`
		);
		expect(kept[0]!.text).toContain(person.id);
		expect(kept[0]!.text).not.toContain(secret);
		expect(lab.logs()).not.toContain(secret);
		const id = path.split('/')[2]!.split('.')[0]!;
		expect(lab.logs()).not.toContain(id);
	});

	it('is asked for with one answer and in one time, whether or not the address is known', async () => {
		const person = await lab.person('engineer');
		const times = { known: [] as number[], unknown: [] as number[] };
		const texts = { known: '', unknown: '' };
		for (let pair = 0; pair < 60; pair++) {
			for (const which of pair % 2 ? (['known', 'unknown'] as const) : (['unknown', 'known'] as const)) {
				await lab.sql(`delete from auth.throttle where key like 'forgotten%'`);
				const email =
					which === 'known' ? person.email : `nobody${String(pair).padStart(2, '0')}@fellmoor.example`;
				const from = performance.now();
				const answer = await lab.browse('/forgotten', { email });
				times[which].push(performance.now() - from);
				expect(answer.status).toBe(200);
				texts[which] = answer.text
					.replaceAll(email, 'ADDRESS')
					.replaceAll(answer.headers.get('x-request-id')!, '')
					.replace(/nonce="[^"]*"/g, '');
			}
		}
		expect(texts.known).toBe(texts.unknown);
		const median = (list: number[]) => list.sort((a, b) => a - b)[list.length / 2]!;
		const [known, unknown] = [median(times.known), median(times.unknown)];
		// On a machine that is busy with other things every answer takes longer, and their spread grows with that.
		expect(Math.abs(known - unknown)).toBeLessThan(Math.max(5, known / 10));
	});

	it('is refused after too many requests, for known and unknown addresses alike', async () => {
		const person = await lab.person('engineer');
		for (const email of [person.email, 'nobody@fellmoor.example']) {
			await lab.sql(`delete from auth.throttle where key like 'forgotten%'`);
			const statuses = [];
			for (let asking = 0; asking < 6; asking++)
				statuses.push((await lab.browse('/forgotten', { email })).status);
			expect(statuses).toEqual([200, 200, 200, 200, 200, 429]);
		}
	});
});

describe('a change of a person', () => {
	it('holds from the next request on, for open sessions and tokens', async () => {
		const person = await lab.person('manager');
		const cookie = (await lab.signIn(person.email))!;
		const add = (code: string) => lab.api(person.token, 'POST', '/clients', { code, name: 'New' });
		expect((await add('AA')).status).toBe(201);
		expect((await lab.browse('/lab/clients', { code: 'AB', name: 'New' }, cookie)).status).toBe(200);
		const changed = await lab.api(admin.token, 'PATCH', `/people/${person.id}`, { role: 'builder' });
		expect(changed.status, changed.text).toBe(200);
		expect((await add('AC')).status).toBe(403);
		expect((await lab.browse('/lab/clients', { code: 'AD', name: 'New' }, cookie)).status).toBe(403);
		expect((await lab.api(person.token, 'GET', '/me')).text).toContain('"role":"builder"');
		expect((await lab.api(admin.token, 'POST', `/people/${person.id}/disable`, {})).status).toBe(200);
		expect((await lab.api(person.token, 'GET', '/me')).status).toBe(401);
		expect((await lab.browse('/account', undefined, cookie)).location).toContain('/sign-in');
		expect(await lab.signIn(person.email)).toBeNull();
	});

	it('from staff to a client’s person leaves them nothing but that client’s', async () => {
		const person = await lab.person('engineer');
		const asClient = { role: 'client', client: 'AA' };
		expect((await lab.api(person.token, 'GET', '/clients')).text).toContain('"AB"');
		expect((await lab.api(admin.token, 'PATCH', `/people/${person.id}`, { role: 'client' })).status).toBe(
			400
		);
		expect((await lab.api(admin.token, 'PATCH', `/people/${person.id}`, asClient)).status).toBe(200);
		const { items } = JSON.parse((await lab.api(person.token, 'GET', '/clients')).text) as {
			items: { code: string }[];
		};
		expect(items.map(({ code }) => code)).toEqual(['AA']);
	});

	it('is refused when someone else changed the person meanwhile', async () => {
		const person = await lab.person('builder');
		const read = await lab.api(admin.token, 'GET', `/people/${person.id}`);
		const tag = { 'if-match': read.headers.get('etag')! };
		const put = (name: string) => lab.api(admin.token, 'PATCH', `/people/${person.id}`, { name }, tag);
		expect((await put('First')).status).toBe(200);
		expect((await put('Second')).status).toBe(412);
	});

	it('never takes the last administrator away, nor one’s own administration unasked', async () => {
		const demote = (id: string, more = {}) =>
			lab.api(admin.token, 'PATCH', `/people/${id}`, { role: 'engineer', ...more });
		expect((await demote(admin.id, { ownRole: true })).text).toContain('only administrator');
		expect(
			(await lab.api(admin.token, 'POST', `/people/${admin.id}/disable`, { ownAccount: true })).status
		).toBe(409);
		const other = await lab.person('admin');
		expect((await demote(admin.id)).text).toContain('ownRole');
		expect((await lab.api(admin.token, 'POST', `/people/${admin.id}/disable`, {})).text).toContain(
			'ownAccount'
		);
		// Two who disable each other at once: one stays.
		const answers = await Promise.all([
			lab.api(admin.token, 'POST', `/people/${other.id}/disable`, {}),
			lab.api(other.token, 'POST', `/people/${admin.id}/disable`, {})
		]);
		const statuses = answers.map(({ status }) => status).sort();
		expect(statuses[0]).toBe(200);
		expect([401, 409]).toContain(statuses[1]);
		const rows = await lab.sql<{ id: string }>(
			`select id from auth.person where role = 'admin' and disabled_at is null`
		);
		expect(rows).toHaveLength(1);
		await lab.sql('update auth.person set disabled_at = null where id = $1', [admin.id]);
	});

	it('leaves a line in the trail with who, before and after', async () => {
		const person = await lab.person('operator');
		await lab.api(admin.token, 'PATCH', `/people/${person.id}`, { role: 'builder', name: 'Ola Berg' });
		const answer = await lab.api(admin.token, 'GET', `/audit?subject=person&subjectId=${person.id}&limit=1`);
		const { items, nextCursor } = JSON.parse(answer.text) as { items: object[]; nextCursor: string };
		expect(items).toMatchObject([
			{
				action: 'person.change',
				person: { id: admin.id },
				subjectName: 'Ola Berg',
				before: { role: 'operator' },
				after: { role: 'builder', name: 'Ola Berg' }
			}
		]);
		const next = await lab.api(
			admin.token,
			'GET',
			`/audit?subject=person&subjectId=${person.id}&limit=2&cursor=${nextCursor}`
		);
		expect((JSON.parse(next.text) as { items: object[] }).items).toMatchObject([
			{ action: 'person.add_token', person: null, after: { token: 'test' } },
			{ action: 'person.add', person: null }
		]);
	});
});

describe('the list of people', () => {
	it('pages by key through every sort without losing or repeating anyone', async () => {
		for (const sort of ['name', '-email', 'role', '-created']) {
			const seen: string[] = [];
			let cursor = '';
			do {
				const answer = await lab.api(
					admin.token,
					'GET',
					`/people?limit=3&sort=${sort}${cursor && `&cursor=${cursor}`}`
				);
				const page = JSON.parse(answer.text) as { items: { id: string }[]; nextCursor: string | null };
				seen.push(...page.items.map(({ id }) => id));
				cursor = page.nextCursor ?? '';
			} while (cursor);
			const [all] = await lab.sql<{ n: number }>('select count(*)::int as n from auth.person');
			expect(new Set(seen).size, sort).toBe(seen.length);
			expect(seen.length, sort).toBe(all!.n);
		}
		const shut = await lab.api(admin.token, 'GET', '/people?state=disabled&role=builder');
		expect((JSON.parse(shut.text) as { items: { state: string }[] }).items.map(({ state }) => state)).toEqual(
			['disabled']
		);
	});
});

describe('one’s own account', () => {
	it('changes the password for who knows the old one, and ends the other sessions', async () => {
		const person = await lab.person('engineer');
		const [here, there] = [(await lab.signIn(person.email))!, (await lab.signIn(person.email))!];
		const send = (old: string, next: string) => lab.browse('/account?/password', { old, new: next }, here);
		const wrong = await send('not the old one', 'the next good sentence');
		expect(wrong.status).toBe(400);
		expect(wrong.text).toContain('This is not your present password');
		expect((await send(PASSWORD, 'short')).text).toContain('Use at least 10 characters');
		expect((await send(PASSWORD, 'the next good sentence')).status).toBe(200);
		expect((await lab.browse('/account', undefined, here)).status).toBe(200);
		expect((await lab.browse('/account', undefined, there)).location).toContain('/sign-in');
		expect((await lab.mailsTo(person.email, 1))[0]!.subject).toContain('was changed');
	});

	it('leaves a line in the trail for every token that is made or revoked, without its secret', async () => {
		const person = await lab.person('engineer');
		const cookie = (await lab.signIn(person.email))!;
		const made = await lab.browse('/account?/create', { label: 'Bench logger' }, cookie);
		const token = /trn\.([0-9a-f-]{36})\.[A-Za-z0-9_-]+/.exec(made.text)!;
		expect((await lab.api(token[0], 'GET', '/me')).status).toBe(200);
		const revoke = () => lab.browse('/account?/revoke', { id: token[1]! }, cookie);
		expect((await revoke()).status).toBe(200);
		expect((await lab.api(token[0], 'GET', '/me')).status).toBe(401);
		expect((await revoke()).status).toBe(404);
		const trail = await lab.api(admin.token, 'GET', `/audit?subjectId=${person.id}&person=${person.id}`);
		expect((JSON.parse(trail.text) as { items: object[] }).items).toMatchObject([
			{ action: 'person.revoke_token', before: { token: 'Bench logger' } },
			{ action: 'person.add_token', after: { token: 'Bench logger' } }
		]);
		expect(trail.text).not.toContain(token[0].split('.')[2]);
	});

	it('tells its sessions and ends those that are named, one’s own alone', async () => {
		const [person, other] = [await lab.person('engineer'), await lab.person('engineer')];
		await lab.signIn(person.email);
		const kept = (await lab.signIn(other.email))!;
		const list = async (token: string) =>
			(JSON.parse((await lab.api(token, 'GET', '/me/sessions')).text) as { items: { id: string }[] }).items;
		const [own] = await list(person.token);
		const [foreign] = await list(other.token);
		expect((await lab.api(person.token, 'DELETE', `/me/sessions?id=${foreign!.id}`)).status).toBe(404);
		expect((await lab.browse('/account', undefined, kept)).status).toBe(200);
		expect((await lab.api(person.token, 'DELETE', `/me/sessions?id=${own!.id}`)).text).toBe('{"ended":1}');
		expect(await list(person.token)).toEqual([]);
	});
});
