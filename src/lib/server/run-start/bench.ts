import { z } from 'zod';
import { INDUCTIONS } from '$lib/domain/model';
import { may, requireMay, type Principal } from '../access';
import { createBuild, NewBuild } from '../builds';
import { createCell, listCells, NewCell } from '../cells';
import { createClient, listClients, NewClient } from '../clients';
import type { Deps } from '../deps';
import { createEngine, listEngines, NewEngine } from '../engines';
import { createFuel, createFuelBatch, listFuelBatches, listFuels, NewFuel, NewFuelBatch } from '../fuels';
import { forbidden, wrongField } from '../problem';

/** The few things that a first record stands on, as one short form gives them. */
export const NewBench = z.object({
	/** Code of a client; empty: a new one of this name. */
	client: z.string().trim().max(64),
	clientName: z.string().trim().max(200),
	engineName: z.string().trim().min(1, 'Give the engine a name.').max(200),
	displacementL: z.number(),
	cylinders: z.number(),
	strokesPerCycle: z.number(),
	ignition: z.enum(['spark', 'compression']),
	induction: z.enum(INDUCTIONS),
	fuelName: z.string().trim().max(200),
	lhvMjKg: z.number().nullable(),
	cellName: z.string().trim().max(200),
	absorberKind: NewCell.shape.absorber.shape.kind,
	maxPowerKw: z.number(),
	maxTorqueNm: z.number(),
	maxSpeedRpm: z.number()
});

/** What is lacking before a first record can be opened, and whether this person may add it. */
interface BenchNeeds {
	client: boolean;
	fuel: boolean;
	cell: boolean;
	/** Whether this person may make all of that. */
	isAllowed: boolean;
}

/** @param lists how many of each there are */
export function benchNeeds(
	who: Principal,
	lists: { clients: number; batches: number; cells: number }
): BenchNeeds {
	const needs = { client: lists.clients === 0, fuel: lists.batches === 0, cell: lists.cells === 0 };
	return {
		...needs,
		isAllowed:
			may(who, 'engine.write') &&
			may(who, 'build.write') &&
			(!needs.client || may(who, 'client.create')) &&
			(!needs.fuel || may(who, 'fuel.write')) &&
			(!needs.cell || may(who, 'cell.write'))
	};
}

const LONGEST_CODE = 20;

/** A code that is made of a name, and of none of those that are taken. */
function codeOf(name: string, taken: readonly string[], fallback: string): string {
	const plain = name
		.normalize('NFKD')
		.toUpperCase()
		.replace(/[^A-Z0-9.]+/g, '-')
		.replace(/^[-.]+|[-.]+$/g, '')
		.slice(0, LONGEST_CODE)
		.replace(/[-.]+$/, '');
	const code = plain || fallback;
	for (let n = 1; ; n++) {
		const tried = n === 1 ? code : `${code}-${n}`;
		if (!taken.includes(tried)) return tried;
	}
}

/** A description's own check, its sentences at the fields of this form. */
function checked<T extends z.ZodType>(
	schema: T,
	input: unknown,
	fields: Record<string, string>
): z.output<T> {
	const parsed = schema.safeParse(input);
	if (parsed.success) return parsed.data;
	const issue = parsed.error.issues[0]!;
	const path = issue.path.join('.');
	throw wrongField(fields[path] ?? path, issue.message);
}

/**
 * Makes an engine with its first build, and client, fuel batch and cell where the lab has none yet. Each is made by its own use
 * case, with its own audit row; what was made before a refusal stays and is found again.
 */
export async function makeBench(deps: Deps, who: Principal, input: z.output<typeof NewBench>) {
	requireMay(who, 'run.open');
	requireMay(who, 'engine.write');
	const [clients, engines, fuels, batches, cells] = await Promise.all([
		listClients(deps, who),
		listEngines(deps, who),
		listFuels(deps, who),
		listFuelBatches(deps, who, { limit: 200 }),
		listCells(deps, who)
	]);
	const needs = benchNeeds(who, {
		clients: clients.length,
		batches: batches.items.length,
		cells: cells.length
	});
	if (!needs.isAllowed) throw forbidden('add what this lab still lacks; a manager can');
	if (needs.client && !input.clientName) throw wrongField('clientName', 'say whose engine this is.');
	if (!needs.client && !clients.some(({ code }) => code === input.client))
		throw wrongField('client', 'choose whose engine this is.');
	// Everything is checked before anything is made.
	const clientCode = needs.client
		? codeOf(input.clientName, [], 'CLIENT')
				.slice(0, 8)
				.replace(/[-.]+$/, '')
		: input.client;
	const client = needs.client
		? checked(
				NewClient,
				{ code: clientCode, name: input.clientName },
				{ name: 'clientName', code: 'clientName' }
			)
		: null;
	const engineCode = codeOf(
		input.engineName,
		engines.filter((engine) => engine.client === clientCode).map(({ code }) => code),
		'ENGINE'
	);
	const engine = checked(
		NewEngine,
		{
			client: clientCode,
			code: engineCode,
			name: input.engineName,
			displacementL: input.displacementL,
			cylinders: input.cylinders,
			strokesPerCycle: input.strokesPerCycle,
			ignition: input.ignition,
			induction: input.induction
		},
		{ name: 'engineName' }
	);
	const cell = needs.cell
		? checked(
				NewCell,
				{
					code: codeOf(input.cellName, [], 'C1'),
					name: input.cellName,
					absorber: {
						kind: input.absorberKind,
						maxPowerKw: input.maxPowerKw,
						maxTorqueNm: input.maxTorqueNm,
						maxSpeedRpm: input.maxSpeedRpm
					}
				},
				{
					name: 'cellName',
					'absorber.maxPowerKw': 'maxPowerKw',
					'absorber.maxTorqueNm': 'maxTorqueNm',
					'absorber.maxSpeedRpm': 'maxSpeedRpm'
				}
			)
		: null;
	const known = fuels.find(({ name }) => name === input.fuelName);
	const fuelCode =
		known?.code ??
		codeOf(
			input.fuelName,
			fuels.map(({ code }) => code),
			'FUEL'
		);
	const fuel =
		needs.fuel && !known
			? checked(NewFuel, { code: fuelCode, name: input.fuelName }, { name: 'fuelName' })
			: null;
	const batch = needs.fuel
		? checked(
				NewFuelBatch,
				{
					fuel: fuelCode,
					code: `${fuelCode}-1`,
					...(input.lhvMjKg === null ? {} : { lhvMjKg: { value: input.lhvMjKg, method: 'as stated' } })
				},
				{}
			)
		: null;
	if (client) await createClient(deps, who, client);
	const made = {
		engine: await createEngine(deps, who, engine),
		build: await createBuild(
			deps,
			who,
			NewBuild.parse({
				client: clientCode,
				engine: engineCode,
				number: codeOf(`${engineCode}.1`, [], 'B1'),
				title: `${input.engineName}, first build`.slice(0, 200)
			})
		),
		fuelBatch: null as { id: string; code: string } | null,
		cell: null as { id: string; code: string } | null
	};
	if (fuel) await createFuel(deps, who, fuel);
	if (batch) made.fuelBatch = await createFuelBatch(deps, who, batch);
	if (cell) made.cell = await createCell(deps, who, cell);
	return made;
}
