import { describe, expect, it } from 'vitest';
import { cancelBooking, confirmBooking, declineBooking, moveBooking } from '../../src/lib/server/bookings';
import { hour, refusal } from './booking-lab';
import { ORIGIN, useMailLab } from './mail-lab';

const mail = useMailLab();
const { lab } = mail;

/** Two clients, and a manager and engineer who are there in every test. */
async function scene(codes: [string, string]) {
	const [own, rival] = [await lab.client(codes[0]), await lab.client(codes[1])];
	const people = {
		manager: await lab.person('manager'),
		engineer: await lab.person('engineer'),
		client: await lab.person('client', own.id, 'Ada Fenn'),
		colleague: await lab.person('client', own.id, 'Bo Fenn'),
		rivalClient: await lab.person('client', rival.id, 'Cy Rook')
	};
	const cell = await lab.cell({ rigUpMinutes: 60, rigDownMinutes: 30 });
	return { ...people, cell, build: await lab.build(own.code), rivalBuild: await lab.build(rival.code) };
}

const delivered = async () => {
	await mail.work();
	return mail.arrived();
};

describe('mail about bookings', () => {
	it('tells the managers of a request, and nobody else', async () => {
		const { cell, build, client, manager } = await scene(['NA', 'NB']);
		const second = await lab.person('manager', null, 'Di Holt');
		const asked = await lab.request(client, cell.code, build.number, hour(26), hour(30), {
			purpose: 'Base line <script>alert(1)</script> & more',
			kind: 'power_sweep'
		});
		const letters = await delivered();
		expect(letters.map((letter) => letter.to).sort()).toEqual([[manager.email], [second.email]].sort());
		const [letter] = letters;
		const parsed = await mail.parsed(letter!);
		expect(parsed.subject).toBe(`Request ${asked.number}: ${cell.code}, Tue 2 Mar 2027 09:00`);
		expect(parsed.from!.value).toEqual([{ name: 'Trunnion', address: 'logbook@fellmoor.example' }]);
		expect(parsed.messageId).toMatch(/^<mail-[0-9a-f-]{36}@bench\.fellmoor\.example>$/);
		expect(parsed.headers.get('auto-submitted')).toBe('auto-generated');
		expect(parsed.attachments).toEqual([]);
		for (const said of [
			'Ada Fenn asks for a slot',
			'Time: from Tue 2 Mar 2027 09:00 to 13:00 (Europe/Stockholm)',
			'Rigging: 60 min before and 30 min after',
			'Test: power sweep',
			'Purpose: Base line <script>alert(1)</script> & more',
			`${ORIGIN}/bookings/${asked.number}`
		])
			expect(parsed.text).toContain(said);
		expect(parsed.html).not.toContain('<script');
		expect(parsed.html).toContain('&lt;script&gt;alert(1)&lt;/script&gt; &amp; more');
	});

	it('follows a slot in the calendar from confirmation over moves to its end', async () => {
		const { cell, build, client, manager } = await scene(['NC', 'ND']);
		const { id, number } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		await delivered();
		const read = async () => {
			const letters = await delivered();
			expect(letters.map((letter) => letter.to)).toEqual([[client.email]]);
			const { text, calendar, event } = await mail.calendar(letters[0]!);
			for (const line of text.split('\r\n')) expect(Buffer.byteLength(line)).toBeLessThanOrEqual(75);
			expect(text).not.toMatch(/[^\r]\n/);
			const of = (name: string) => String(event.getFirstPropertyValue(name));
			return {
				subject: letters[0]!.subject,
				method: String(calendar.getFirstPropertyValue('method')),
				uid: of('uid'),
				sequence: of('sequence'),
				start: of('dtstart'),
				end: of('dtend'),
				status: of('status'),
				summary: of('summary'),
				location: of('location'),
				attendee: of('attendee').toLowerCase(),
				organizer: of('organizer').toLowerCase()
			};
		};

		await confirmBooking(lab.deps, manager, id);
		const confirmed = await read();
		expect(confirmed).toEqual({
			subject: `Confirmed: ${number}, ${cell.code}, Tue 2 Mar 2027 09:00`,
			method: 'REQUEST',
			uid: `booking-${id}@bench.fellmoor.example`,
			sequence: '0',
			start: '2027-03-02T08:00:00Z',
			end: '2027-03-02T12:00:00Z',
			status: 'CONFIRMED',
			summary: `${cell.code}: build ${build.number}`,
			location: cell.code,
			attendee: `mailto:${client.email}`,
			organizer: 'mailto:logbook@fellmoor.example'
		});

		await moveBooking(lab.deps, manager, id, { from: hour(27), to: hour(31) });
		expect(await read()).toEqual({
			...confirmed,
			subject: `Moved: ${number}, ${cell.code}, Tue 2 Mar 2027 10:00`,
			sequence: '1',
			start: '2027-03-02T09:00:00Z',
			end: '2027-03-02T13:00:00Z'
		});

		// The client asks for another time; confirmed, it takes the slot's place in the calendar too: one mail, no cancellation.
		const asked = await moveBooking(lab.deps, client, id, { from: hour(50), to: hour(54) });
		expect((await delivered()).every((letter) => letter.subject.startsWith('Request'))).toBe(true);
		await confirmBooking(lab.deps, manager, asked.id);
		expect(await read()).toEqual({
			...confirmed,
			subject: `Moved: ${asked.number}, ${cell.code}, Wed 3 Mar 2027 09:00`,
			sequence: '2',
			start: '2027-03-03T08:00:00Z',
			end: '2027-03-03T12:00:00Z'
		});

		await cancelBooking(lab.deps, manager, asked.id, { reason: 'Absorber bearing' });
		expect(await read()).toMatchObject({
			subject: `Cancelled: ${asked.number}, ${cell.code}, Wed 3 Mar 2027 09:00`,
			method: 'CANCEL',
			uid: confirmed.uid,
			sequence: '3',
			status: 'CANCELLED'
		});
	});

	it('tells everyone who has the slot in their calendar when another person’s move is confirmed', async () => {
		const { cell, build, client, engineer, manager } = await scene(['NE', 'NF']);
		const { id } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		await confirmBooking(lab.deps, manager, id);
		const asked = await moveBooking(lab.deps, engineer, id, { from: hour(28), to: hour(32) });
		await delivered();
		await confirmBooking(lab.deps, manager, asked.id);
		const letters = await delivered();
		expect(letters.map((letter) => letter.to[0]).sort()).toEqual([client.email, engineer.email].sort());
	});

	it('declines with the reason, without a calendar; a slot whose move is declined stands', async () => {
		const { cell, build, client, manager } = await scene(['NG', 'NH']);
		const { id, number } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		await confirmBooking(lab.deps, manager, id);
		const asked = await moveBooking(lab.deps, client, id, { to: hour(32) });
		await delivered();
		await declineBooking(lab.deps, manager, asked.id, { reason: 'Night shift is short' });
		const letters = await delivered();
		expect(letters).toMatchObject([{ to: [client.email], attachments: [] }]);
		expect(letters[0]!.text).toContain(`The move was declined. ${number} stands as it was.`);
		expect(letters[0]!.text).toContain('Reason: Night shift is short');
	});

	it('is silent about a move that was taken back before it was told, and tells the next one', async () => {
		const { cell, build, client, manager } = await scene(['NO', 'NP']);
		const { id } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		await confirmBooking(lab.deps, manager, id);
		await delivered();
		await moveBooking(lab.deps, manager, id, { from: hour(27), to: hour(31) });
		await moveBooking(lab.deps, manager, id, { from: hour(26), to: hour(30) });
		expect(await delivered()).toEqual([]);
		await moveBooking(lab.deps, manager, id, { from: hour(27), to: hour(31) });
		const told = await delivered();
		expect(told.map((letter) => letter.to)).toEqual([[client.email]]);
		const { event } = await mail.calendar(told[0]!);
		expect(String(event.getFirstPropertyValue('sequence'))).toBe('3');
		await moveBooking(lab.deps, manager, id, { from: hour(26), to: hour(30) });
		expect(await delivered()).toHaveLength(1);
	});

	it('sends no confirmation that was undone before it left, and then no calendar either', async () => {
		const { cell, build, client, manager } = await scene(['NI', 'NJ']);
		const { id } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		await delivered();
		await confirmBooking(lab.deps, manager, id);
		await cancelBooking(lab.deps, manager, id);
		expect(await delivered()).toMatchObject([
			{ to: [client.email], subject: expect.stringContaining('Cancelled'), attachments: [] }
		]);
	});

	it('of a slot that a client gives back reaches the managers too; of a withdrawn request nobody', async () => {
		const { cell, build, client, manager } = await scene(['NK', 'NL']);
		const { id } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		const withdrawn = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		await confirmBooking(lab.deps, manager, id);
		await delivered();
		await cancelBooking(lab.deps, client, id);
		const letters = await delivered();
		const to = letters.map((letter) => letter.to[0]);
		expect(to).toContain(client.email);
		expect(to).toContain(manager.email);
		const managers = letters.filter((letter) => letter.to[0] !== client.email);
		expect(managers.every((letter) => letter.attachments.length === 0)).toBe(true);
		await cancelBooking(lab.deps, client, withdrawn.id);
		expect(await delivered()).toEqual([]);
	});

	it('is not written for what was rolled back', async () => {
		const { cell, build, client, manager, rivalBuild, rivalClient } = await scene(['NM', 'NN']);
		const first = await lab.request(client, cell.code, build.number, hour(26), hour(30));
		const second = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(28), hour(32));
		await confirmBooking(lab.deps, manager, first.id);
		await delivered();
		expect((await refusal(confirmBooking(lab.deps, manager, second.id))).status).toBe(409);
		expect(await delivered()).toEqual([]);
		const rows = await lab.deps.pools.lab
			.selectFrom('mail')
			.select('kind')
			.where('subjectId', '=', second.id)
			.execute();
		expect(new Set(rows.map((row) => row.kind))).toEqual(new Set(['booking.requested']));
	});
});

describe('free text', () => {
	const HOSTILE = [
		'x\r\nBcc: eve@rival.example',
		'x\nSubject: other',
		'x\r\n\r\n<html>',
		'x\u2028ATTENDEE:mailto:eve@rival.example',
		'x\r\nEND:VEVENT\r\nBEGIN:VEVENT\r\nUID:other',
		'a;b,c\\n"d":e',
		'naïve 試験 🏁 '.repeat(12),
		'=?utf-8?B?QmNjOg==?=',
		'"><img src=x onerror=alert(1)>',
		'${7*7} {{7*7}} %0d%0aBcc:eve@rival.example'
	];

	it.each(HOSTILE.map((text, index) => [index, text] as const))(
		'%i cannot add a header, a recipient, a tag or a calendar property',
		async (index, text) => {
			const { cell, build, manager } = await scene([`H${index}`, `I${index}`]);
			const { clientId } = (await lab.deps.pools.lab
				.selectFrom('build')
				.select('clientId')
				.where('id', '=', build.id)
				.executeTakeFirst())!;
			const client = await lab.person('client', clientId, Array.from(text).slice(0, 60).join(''));
			await lab.deps.pools.lab.updateTable('build').set({ title: text }).where('id', '=', build.id).execute();
			const { id } = await lab.request(client, cell.code, build.number, hour(26), hour(30), {
				purpose: text
			});
			await confirmBooking(lab.deps, manager, id, { reason: text });
			const letters = await delivered();
			expect(letters.length).toBeGreaterThanOrEqual(2);
			for (const letter of letters) {
				expect(letter.to).toHaveLength(1);
				expect(letter.to[0]).toMatch(/^p\d+@fellmoor\.example$/);
				const parsed = await mail.parsed(letter);
				expect([...parsed.headers.keys()].sort()).toEqual(
					[
						'auto-submitted',
						'content-type',
						'date',
						'from',
						'message-id',
						'mime-version',
						'subject',
						'to'
					].sort()
				);
				expect(parsed.subject).toMatch(/^(Request|Confirmed)[: ]/);
				expect(String(parsed.html)).not.toMatch(/<(img|script)|<html>.*<html/i);
			}
			const confirmation = letters.find((letter) => letter.subject.startsWith('Confirmed'))!;
			const { text: ics, calendar, event } = await mail.calendar(confirmation);
			for (const line of ics.split('\r\n')) expect(Buffer.byteLength(line)).toBeLessThanOrEqual(75);
			expect(calendar.getAllSubcomponents()).toHaveLength(1);
			expect(event.getAllProperties('attendee')).toHaveLength(1);
			expect(String(event.getFirstPropertyValue('uid'))).toBe(`booking-${id}@bench.fellmoor.example`);
			expect(String(event.getFirstPropertyValue('attendee')).toLowerCase()).toBe(`mailto:${client.email}`);
		}
	);
});
