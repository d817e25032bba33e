import { setTimeout as sleep } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { confirmBooking } from '../../src/lib/server/bookings';
import { mailHandlers } from '../../src/lib/server/mail';
import { startWorker } from '../../src/lib/server/worker';
import { hour } from './booking-lab';
import { useMailLab } from './mail-lab';

const mail = useMailLab();
const { lab } = mail;
let codes = 0;

/** A confirmed slot whose confirmation is written but not sent; the request's own mails are out of the way. */
async function promisedMail() {
	const own = await lab.client(`D${++codes}`);
	const [manager, client] = [await lab.person('manager'), await lab.person('client', own.id)];
	const [cell, build] = [await lab.cell(), await lab.build(own.code)];
	const { id } = await lab.request(client, cell.code, build.number, hour(26), hour(30));
	await mail.work();
	await confirmBooking(lab.deps, manager, id);
	const event = { clientId: own.id, event: 'booking.confirmed', subjectId: id, revision: 2 } as const;
	const handlers = mailHandlers(lab.deps);
	await handlers['mail.notify'](event);
	const rows = () =>
		lab.deps.pools.lab
			.selectFrom('mail')
			.select(['id', 'sentAt', 'droppedReason'])
			.where('subjectId', '=', id)
			.where('kind', '=', 'booking.confirmed')
			.execute();
	const [row] = await rows();
	await mail.arrived();
	return {
		client,
		event,
		notify: () => handlers['mail.notify'](event),
		send: () => handlers['mail.send']({ clientId: own.id, mailId: row!.id }),
		rows
	};
}

describe('sending', () => {
	it('is one mail a person however often the jobs run', async () => {
		const { client, notify, send, rows } = await promisedMail();
		await Promise.all([notify(), notify()]);
		expect(await rows()).toHaveLength(1);
		await send();
		await send();
		await mail.work();
		expect((await mail.arrived()).map((letter) => letter.to)).toEqual([[client.email]]);
		expect((await rows())[0]!.sentAt).not.toBeNull();
	});

	it('is tried again by the worker after a refusal for now, and arrives once', async () => {
		const { client, rows } = await promisedMail();
		await mail.misbehave([{ recipient: client.email, action: 'refuse', code: 451, times: 2 }]);
		const worker = await startWorker(lab.deps, 1);
		try {
			const until = performance.now() + 40_000;
			while (!(await rows())[0]!.sentAt && performance.now() < until) await sleep(200);
		} finally {
			await worker.stop();
			await mail.misbehave([]);
		}
		expect(await rows()).toMatchObject([{ droppedReason: null, sentAt: expect.any(Date) }]);
		expect((await mail.arrived()).map((letter) => letter.to)).toEqual([[client.email]]);
	});

	it.each([421, 451])(
		'fails without a word about the address on a %i, and arrives the next time',
		async (code) => {
			const { client, send, rows } = await promisedMail();
			await mail.misbehave([{ recipient: client.email, action: 'refuse', code, times: 1 }]);
			const failed: Error = await send().then(
				() => new Error('it was sent'),
				(error: Error) => error
			);
			expect(failed.message).toMatch(/^mail [0-9a-f-]{36} was not taken \(.+\); it will be tried again$/);
			expect(`${failed.stack}${String(failed.cause)}`).not.toContain(client.email);
			expect(await rows()).toMatchObject([{ sentAt: null, droppedReason: null }]);
			await send();
			expect((await mail.arrived()).map((letter) => letter.to)).toEqual([[client.email]]);
		}
	);

	it('carries the same Message-ID when it could not know whether it went', async () => {
		const { client, send } = await promisedMail();
		await mail.misbehave([{ recipient: client.email, action: 'close_after_data', times: 1 }]);
		await expect(send()).rejects.toThrow('it will be tried again');
		await send();
		const letters = await mail.arrived();
		expect(letters).toHaveLength(2);
		expect(new Set(letters.map((letter) => letter.messageId)).size).toBe(1);
	});

	it('ends where the server refuses the mailbox for good', async () => {
		const { client, send, rows } = await promisedMail();
		await mail.misbehave([{ recipient: client.email, action: 'refuse', code: 550 }]);
		await send();
		await mail.misbehave([]);
		await send();
		expect(await rows()).toMatchObject([
			{ sentAt: null, droppedReason: 'The mail server refused the address (550).' }
		]);
		expect(await mail.arrived()).toEqual([]);
	});

	it('goes to the address of the moment, and to nobody who lost the right meanwhile', async () => {
		const moved = await promisedMail();
		const auth = lab.deps.pools.auth;
		const change = (personId: string, values: object) =>
			auth.updateTable('auth.person').set(values).where('id', '=', personId).execute();
		await change(moved.client.personId, { email: 'new.address@fellmoor.example' });
		await moved.send();
		const [letter] = await mail.arrived();
		expect(letter!.to).toEqual(['new.address@fellmoor.example']);
		const { event } = await mail.calendar(letter!);
		expect(String(event.getFirstPropertyValue('attendee')).toLowerCase()).toBe(
			'mailto:new.address@fellmoor.example'
		);

		const gone = await promisedMail();
		await change(gone.client.personId, { disabledAt: new Date() });
		await gone.send();
		expect((await gone.rows())[0]!.droppedReason).toContain('disabled');

		const elsewhere = await promisedMail();
		const other = await lab.client('ELSEWHERE');
		await change(elsewhere.client.personId, { clientId: other.id });
		await elsewhere.send();
		expect((await elsewhere.rows())[0]!.droppedReason).toContain('may no longer read');
		expect(await mail.arrived()).toEqual([]);
	});
});
