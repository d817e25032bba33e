import { Readable } from 'node:stream';
import { sql } from 'kysely';
import { describe, expect, it } from 'vitest';
import {
	addAttachment,
	downloadAttachment,
	listAttachments,
	removeAttachment
} from '../../src/lib/server/attachments';
import { createFuel, createFuelBatch } from '../../src/lib/server/fuels';
import { NewRun, openRun, voidRun } from '../../src/lib/server/runs';
import { hour, refusal, useBookingLab } from './booking-lab';
import { JPEG, PDF, PNG, WEBP } from './files';

/** Files that people attach: what is taken, who sees it, how it is handed out, and that nothing of it is lost. */
const lab = useBookingLab();

const upload = (
	filename: string | null,
	bytes: Uint8Array | string,
	declaredBytes: number | null = null
) => ({
	filename,
	body: Readable.from([Buffer.from(bytes)]),
	declaredBytes
});

let made = 0;
async function scene() {
	const n = ++made;
	const [own, rival] = [await lab.client(`A${n}`), await lab.client(`Z${n}`)];
	const [cell, build] = [await lab.cell(), await lab.build(own.code)];
	const manager = await lab.person('manager');
	await createFuel(lab.deps, manager, { code: `F${n}`, name: 'Fuel' });
	const batch = await createFuelBatch(lab.deps, manager, { fuel: `F${n}`, code: `Q${n}` });
	const operator = await lab.person('operator');
	const run = await openRun(
		lab.deps,
		operator,
		NewRun.parse({
			client: own.code,
			build: build.id,
			cell: cell.code,
			fuelBatch: batch.id,
			kind: 'free_log',
			startedAt: hour(1).toISOString()
		})
	);
	return {
		run: { kind: 'run', ref: run.id },
		build: { kind: 'build', ref: build.id },
		batch: { kind: 'fuel_batch', ref: batch.id },
		operator,
		manager,
		engineer: await lab.person('engineer'),
		client: await lab.person('client', own.id),
		rival: await lab.person('client', rival.id)
	} as const;
}

describe('what is kept', () => {
	it('is what the bytes say, under a name that fits them', async () => {
		const { run, operator } = await scene();
		const kept = [];
		for (const [name, bytes] of [
			['dial.png', PNG],
			['note.html', PNG],
			['C:\\camera\\IMG 1.JPG', JPEG],
			['\u202egnp.exe', WEBP],
			['certificate.pdf', PDF],
			[null, PDF]
		] as const)
			kept.push(await addAttachment(lab.deps, operator, run, upload(name, bytes)));
		expect(kept.map(({ filename, contentType }) => `${filename} ${contentType}`)).toEqual([
			'dial.png image/png',
			'note.html.png image/png',
			'IMG 1.JPG image/jpeg',
			'gnp.exe.webp image/webp',
			'certificate.pdf application/pdf',
			'attachment.pdf application/pdf'
		]);
		expect(await listAttachments(lab.deps, operator, run)).toEqual(kept);
	});

	it('is nothing else, whatever the name says, and each refusal says what to send', async () => {
		const { run, operator } = await scene();
		const heic = Buffer.from('\0\0\0\x18ftypheic\0\0\0\0mif1heic', 'latin1');
		for (const [name, bytes, said] of [
			['page.png', '<!doctype html><script>alert(1)</script>', 'none of these'],
			['drawing.svg', '<svg xmlns="http://www.w3.org/2000/svg" onload="alert(1)"/>', 'JPEG, PNG, WebP'],
			['moving.jpg', 'GIF89a\x01\0\x01\0\0\0\0;', 'image/gif'],
			['archive.pdf', Buffer.from('504b0304140000000000', 'hex'), 'application/zip'],
			['phone.jpg', heic, 'Send it as JPEG'],
			['nothing.png', '', 'empty']
		] as const) {
			const problem = await refusal(addAttachment(lab.deps, operator, run, upload(name, bytes)));
			expect(problem.status, name).toBe(415);
			expect(problem.message, name).toContain(said);
		}
		expect(await listAttachments(lab.deps, operator, run)).toEqual([]);
	});

	it('has a size that is told before and counted on the way', async () => {
		const { run, operator } = await scene();
		const told = await refusal(
			addAttachment(lab.deps, operator, run, upload('huge.png', PNG, 26 * 1024 * 1024))
		);
		const came = await refusal(
			addAttachment(lab.deps, operator, run, upload('huge.png', Buffer.alloc(26 * 1024 * 1024)))
		);
		for (const problem of [told, came]) {
			expect(problem.status).toBe(413);
			expect(problem.message).toBe(
				'An attachment may have 25 MiB at most. Send a smaller picture, or split the document.'
			);
		}
	});
});

describe('what is handed out', () => {
	it('is the file itself, as a download from a page that may do nothing', async () => {
		const { run, operator } = await scene();
		const { id } = await addAttachment(lab.deps, operator, run, upload('Zähler "1".png', PNG));
		const answer = await downloadAttachment(lab.deps, operator, id);
		expect(new Uint8Array(await answer.arrayBuffer())).toEqual(PNG);
		expect(Object.fromEntries(answer.headers)).toEqual({
			'content-type': 'image/png',
			'content-length': String(PNG.length),
			'content-disposition': `attachment; filename="Z_hler _1_.png"; filename*=UTF-8''Z%C3%A4hler%20%221%22.png`,
			'content-security-policy': "default-src 'none'; sandbox",
			'x-content-type-options': 'nosniff',
			'cache-control': 'no-store'
		});
	});

	it('is nobody’s but the client’s and the lab’s; of the lab’s batch, everybody’s', async () => {
		const { run, build, batch, operator, manager, client, rival } = await scene();
		for (const subject of [run, build]) {
			const { id } = await addAttachment(lab.deps, operator, subject, upload('a.png', PNG));
			expect((await listAttachments(lab.deps, client, subject)).map((item) => item.id)).toEqual([id]);
			expect((await downloadAttachment(lab.deps, client, id)).status).toBe(200);
			for (const asked of [
				downloadAttachment(lab.deps, rival, id),
				listAttachments(lab.deps, rival, subject)
			])
				expect((await refusal(asked)).status).toBe(404);
		}
		const certificate = await addAttachment(lab.deps, manager, batch, upload('c.pdf', PDF));
		for (const who of [client, rival]) {
			expect(await listAttachments(lab.deps, who, batch)).toEqual([certificate]);
			expect((await downloadAttachment(lab.deps, who, certificate.id)).status).toBe(200);
		}
		for (const absent of ['99999999-9999-4999-8999-999999999999', 'x', ''])
			expect((await refusal(downloadAttachment(lab.deps, manager, absent))).status).toBe(404);
	});
});

describe('removing', () => {
	it('needs a reason once, hides it from the client, and keeps row, bytes and trail', async () => {
		const { run, build, operator, engineer, client } = await scene();
		const { id } = await addAttachment(lab.deps, operator, run, upload('wrong.png', PNG));
		const elsewhere = await refusal(removeAttachment(lab.deps, engineer, build, id, { reason: 'x' }));
		expect(elsewhere.status).toBe(404);
		await removeAttachment(lab.deps, engineer, run, id, { reason: 'Another engine.' });
		expect(await listAttachments(lab.deps, operator, run)).toMatchObject([
			{ id, removed: { by: engineer.name, reason: 'Another engine.' } }
		]);
		expect((await downloadAttachment(lab.deps, operator, id)).status).toBe(200);
		expect(await listAttachments(lab.deps, client, run)).toEqual([]);
		expect((await refusal(downloadAttachment(lab.deps, client, id))).status).toBe(404);
		const again = await refusal(removeAttachment(lab.deps, engineer, run, id, { reason: 'Again.' }));
		expect(again.status).toBe(409);
		const { rows } = await sql<{ action: string }>`
			select action from audit where subject = 'run' and after ->> 'attachmentId' = ${id} order by at`.execute(
			lab.deps.pools.lab
		);
		expect(rows.map(({ action }) => action)).toEqual(['attachment.add', 'attachment.remove']);
	});

	it('cannot be undone, and a row can neither change nor go, even for the lab’s own login', async () => {
		const { run, operator } = await scene();
		const { id } = await addAttachment(lab.deps, operator, run, upload('a.png', PNG));
		await removeAttachment(lab.deps, operator, run, id, { reason: 'Blurred.' });
		const db = lab.deps.pools.lab;
		const back =
			await sql`update attachment set removed_at = null, removed_by = null, removed_reason = null where id = ${id}`.execute(
				db
			);
		expect(back.numAffectedRows).toBe(0n);
		await expect(sql`update attachment set filename = 'b.png' where id = ${id}`.execute(db)).rejects.toThrow(
			'permission denied'
		);
		await expect(sql`delete from attachment where id = ${id}`.execute(db)).rejects.toThrow(
			'permission denied'
		);
	});

	it('is over once the run is decided', async () => {
		const { run, operator, engineer } = await scene();
		const { id } = await addAttachment(lab.deps, operator, run, upload('a.png', PNG));
		await voidRun(lab.deps, engineer, run.ref, 'Wrong engine.', null);
		const problem = await refusal(removeAttachment(lab.deps, engineer, run, id, { reason: 'x' }));
		expect(problem.message).toContain('what was attached to it stays');
	});
});
