import { setError, type SuperValidated } from 'sveltekit-superforms';
import { z } from 'zod';
import { isEmptyPair, typedNumber, typedPairs } from '$lib/domain/display/typed-number';
import { readHours, typedHours } from '$lib/domain/scheduling/typed-hours';
import { ABSORBER_KINDS, TORQUE_PLACES, type Cell } from '$lib/server/cells';

const number = z.number({ error: 'Give a number.' }).nullable().default(null);

/** How torque is weighed, flat as a form is; bounds are the use case's own. */
const chainFields = {
	torqueAt: z.enum(TORQUE_PLACES).default('flange'),
	rotorInertiaKgM2: number,
	shaftInertiaKgM2: number,
	armM: number,
	gravityMps2: number,
	gearRatio: number,
	gearEfficiencyPct: number
};

/** As the form has it: what may be typed wrongly is text, so that it stays. */
export const CellForm = z.object({
	/** Of the cell as it was read; 0 for a new one. */
	version: z.number().default(0),
	code: z.string().trim().default(''),
	name: z.string().trim().default(''),
	kind: z.enum(ABSORBER_KINDS).default('eddy_current'),
	maxPowerKw: number,
	maxTorqueNm: number,
	maxSpeedRpm: number,
	envelope: z
		.array(z.object({ x: z.string().max(40), y: z.string().max(40) }))
		.max(600)
		.default([]),
	fuels: z.array(z.string()).default([]),
	rigUpMinutes: number,
	rigDownMinutes: number,
	open: z.enum(['always', 'hours']).default('always'),
	/** Monday first. */
	hours: z.array(z.string().max(200)).length(7).default(['', '', '', '', '', '', '']),
	colour: z.string().default(''),
	...chainFields
});
export type CellFormData = z.infer<typeof CellForm>;

export const ChainForm = z.object({
	...chainFields,
	/** Wall clock of the lab. */
	validFrom: z.string().regex(/^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/, 'Give the date and time.'),
	reason: z.string().trim().min(1, 'Say why.').max(1000, 'At most 1000 characters.'),
	/** What to do with figures of the past that it changes; empty until that has been asked. */
	past: z.enum(['', 'leave', 'recompute']).default('')
});

type Flat = Pick<CellFormData, keyof typeof chainFields>;

export function chainOf(data: Flat) {
	const { gearRatio, gearEfficiencyPct, torqueAt, rotorInertiaKgM2, shaftInertiaKgM2, armM, gravityMps2 } =
		data;
	const isGeared = gearRatio !== null || gearEfficiencyPct !== null;
	return {
		torqueAt,
		rotorInertiaKgM2,
		shaftInertiaKgM2,
		armM,
		gravityMps2,
		gear: isGeared
			? { ratio: gearRatio, efficiency: gearEfficiencyPct === null ? null : gearEfficiencyPct / 100 }
			: null
	};
}

export const chainDraft = (chain: Omit<ReturnType<typeof chainOf>, 'gear'> & Pick<Cell, 'gear'>): Flat => ({
	torqueAt: chain.torqueAt,
	rotorInertiaKgM2: chain.rotorInertiaKgM2,
	shaftInertiaKgM2: chain.shaftInertiaKgM2,
	armM: chain.armM,
	gravityMps2: chain.gravityMps2,
	gearRatio: chain.gear?.ratio ?? null,
	gearEfficiencyPct: chain.gear ? Number((chain.gear.efficiency * 100).toPrecision(12)) : null
});

export const cellDraft = (cell: Cell): CellFormData => ({
	...chainDraft(cell),
	version: cell.version,
	code: cell.code,
	name: cell.name,
	kind: cell.absorber.kind,
	maxPowerKw: cell.absorber.maxPowerKw,
	maxTorqueNm: cell.absorber.maxTorqueNm,
	maxSpeedRpm: cell.absorber.maxSpeedRpm,
	envelope: typedPairs(cell.envelope ?? []),
	fuels: cell.fuels ?? [],
	rigUpMinutes: cell.rigUpMinutes,
	rigDownMinutes: cell.rigDownMinutes,
	open: cell.openingHours ? 'hours' : 'always',
	hours: typedHours(cell.openingHours ?? []),
	colour: String(cell.colour)
});

/** What a cell is, without how it weighs torque, as the use cases take it; their schema judges it. */
export function cellOf(data: CellFormData) {
	const points = data.envelope.filter((pair) => !isEmptyPair(pair));
	const hours = data.hours.map((text, at) => readHours(at + 1, text));
	return {
		name: data.name,
		absorber: {
			kind: data.kind,
			maxPowerKw: data.maxPowerKw,
			maxTorqueNm: data.maxTorqueNm,
			maxSpeedRpm: data.maxSpeedRpm
		},
		envelope: points.length ? points.map(({ x, y }) => [typedNumber(x), typedNumber(y)]) : null,
		fuels: data.fuels.length ? data.fuels : null,
		rigUpMinutes: data.rigUpMinutes ?? 0,
		rigDownMinutes: data.rigDownMinutes ?? 0,
		openingHours: data.open === 'hours' ? hours.flatMap((day) => ('hours' in day ? day.hours : [])) : null,
		...(data.colour === '' ? {} : { colour: Number(data.colour) })
	};
}

const NUMBER = 'Give a number; a point for decimals, no mark between thousands.';

/** What of the text cannot be read, each at its place. @returns whether all can */
export function checkTyped(form: SuperValidated<CellFormData>): boolean {
	let isRight = true;
	const say = (path: string, message: string) => {
		isRight = false;
		setError(form, path as never, message);
	};
	form.data.envelope.forEach((pair, at) => {
		if (isEmptyPair(pair)) return;
		for (const side of ['x', 'y'] as const) {
			const value = typedNumber(pair[side]);
			if (value === null || Number.isNaN(value)) say(`envelope[${at}].${side}`, NUMBER);
		}
	});
	if (form.data.open === 'hours')
		form.data.hours.forEach((text, at) => {
			const read = readHours(at + 1, text);
			if ('error' in read) say(`hours[${at}]`, read.error);
		});
	return isRight;
}

/** Names that the use case has for what the form calls otherwise. */
const FIELDS: Record<string, string> = {
	'absorber.maxPowerKw': 'maxPowerKw',
	'absorber.maxTorqueNm': 'maxTorqueNm',
	'absorber.maxSpeedRpm': 'maxSpeedRpm',
	'gear.ratio': 'gearRatio',
	'gear.efficiency': 'gearEfficiencyPct'
};

/** The schema's complaints at the form's fields; what belongs to none stands above the form. */
export function placeIssues<T extends Record<string, unknown>>(
	form: SuperValidated<T>,
	issues: readonly { path: readonly PropertyKey[]; message: string }[]
): void {
	for (const { path, message } of issues) {
		const name = path.join('.');
		const first = String(path[0] ?? '');
		const sentence = `${message.charAt(0).toUpperCase()}${message.slice(1)}.`;
		if (first === 'envelope') setError(form, 'envelope._errors' as never, sentence);
		else if (first === 'fuels') setError(form, 'fuels._errors' as never, sentence);
		else if ((FIELDS[name] ?? name) in form.data) setError(form, (FIELDS[name] ?? name) as never, sentence);
		else setError(form, '' as never, `${name}: ${sentence}`);
	}
}
