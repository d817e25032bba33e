import { randomBytes } from 'node:crypto';
import pg from 'pg';

/** Gives a run figures without a file, as a computation would leave them: for tests of what is made of many runs' figures. */
export async function putFigures(
	superuserUrl: string,
	number: string,
	figures: Readonly<Record<string, { value: number; unit: string; u?: number; outsideRange?: string }>>
): Promise<void> {
	const db = new pg.Client({ connectionString: superuserUrl });
	await db.connect();
	try {
		const one = async (text: string, values: unknown[]) =>
			(await db.query<{ id: string }>(text, values)).rows[0]!.id;
		const trace = await one(
			`insert into trace (client_id, run_id, filename, state, is_primary, sha256, size_bytes, object_key, uploaded_by)
			 select client_id, id, 'made.csv', 'ready', true, $2, 1, 'made', logged_by from run where number = $1 returning id`,
			[number, randomBytes(32)]
		);
		const curve = { speed: [1000, 2000, 3000], torque: [90, 100, 95], power: [9.4, 20.9, 29.8] };
		const reduction = await one(
			`insert into reduction (client_id, run_id, trace_id, method_version, settings, inputs, curve, points)
			 select client_id, run_id, id, 'made', '{}', '{}', $2, '[]' from trace where id = $1 returning id`,
			[trace, JSON.stringify(curve)]
		);
		for (const [code, { value, unit, u, outsideRange }] of Object.entries(figures))
			await db.query(
				`insert into metric (client_id, run_id, reduction_id, code, value, unit, u, method, outside_range)
				 select client_id, run_id, id, $2, $3, $4, $5, 'made.1', $6 from reduction where id = $1`,
				[reduction, code, value, unit, u ?? null, outsideRange ?? null]
			);
	} finally {
		await db.end();
	}
}
