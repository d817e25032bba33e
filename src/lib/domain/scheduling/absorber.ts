import type { Gear, RunKind } from '../model';

type Line = readonly (readonly [rpm: number, torqueNm: number])[];

/** What a cell's machine can take up. Power kW, torque N·m, speed rev/min. */
export interface AbsorberFacts {
	kind: string;
	maxPowerKw: number;
	maxTorqueNm: number;
	maxSpeedRpm: number;
	/** Torque limit over speed, speeds rising; null = from the machine's own power and torque. */
	envelope: Line | null;
	/** Between it and the engine; absent or null: they turn as one. */
	gear?: Gear | null | undefined;
}

/** What an engine is expected to give; null = not recorded. */
export interface EngineDemand {
	maxSpeedRpm: number | null;
	expectedTorque: Line | null;
}

export interface Remark {
	code: string;
	message: string;
}

const RPM_STEP = 25;
/** Machines that only brake: they cannot turn an engine that does not fire. */
const BRAKES_ONLY = ['eddy_current', 'water_brake'];

function lineAt(line: Line, rpm: number): number {
	const after = line.findIndex(([speed]) => speed >= rpm);
	if (after === -1) return line.at(-1)![1];
	const [x1, y1] = line[after]!;
	if (after === 0 || x1 === rpm) return y1;
	const [x0, y0] = line[after - 1]!;
	return y0 + ((y1 - y0) * (rpm - x0)) / (x1 - x0);
}

/**
 * The most torque the machine can hold at a speed, N·m: its envelope where one is recorded (the first value held below its
 * first speed, none above its last), else the lesser of its torque and `60 000·P/(2π·N)`. 0 above its top speed.
 */
export function absorbableTorqueNm(absorber: AbsorberFacts, rpm: number): number {
	if (rpm > absorber.maxSpeedRpm) return 0;
	if (absorber.envelope?.length)
		return rpm > absorber.envelope.at(-1)![0] ? 0 : lineAt(absorber.envelope, rpm);
	if (rpm <= 0) return absorber.maxTorqueNm;
	return Math.min(absorber.maxTorqueNm, (60_000 * absorber.maxPowerKw) / (2 * Math.PI * rpm));
}

/**
 * The machine as the engine meets it through a gear of ratio i and efficiency η: i times its speed, `1/(i·η)` of its torque,
 * `1/η` of its power, since the gear takes the rest.
 */
function atEngine(absorber: AbsorberFacts): AbsorberFacts {
	if (!absorber.gear) return absorber;
	const { ratio, efficiency } = absorber.gear;
	return {
		kind: absorber.kind,
		maxPowerKw: absorber.maxPowerKw / efficiency,
		maxTorqueNm: absorber.maxTorqueNm / (ratio * efficiency),
		maxSpeedRpm: absorber.maxSpeedRpm * ratio,
		envelope:
			absorber.envelope?.map(([rpm, torqueNm]) => [rpm * ratio, torqueNm / (ratio * efficiency)] as const) ??
			null
	};
}

/** Where the expected torque is furthest above what can be held, as a ratio; a line against a hyperbola has its worst anywhere. */
function worstExcess(
	absorber: AbsorberFacts,
	expected: Line
): { rpm: number; has: number; can: number } | null {
	const first = expected[0]![0];
	const last = expected.at(-1)![0];
	const speeds = [...expected, ...(absorber.envelope ?? [])].map(([rpm]) => rpm);
	for (let rpm = first; rpm < last; rpm += RPM_STEP) speeds.push(rpm);
	let worst: { rpm: number; has: number; can: number } | null = null;
	for (const rpm of speeds) {
		if (rpm < first || rpm > last || rpm > absorber.maxSpeedRpm) continue;
		const has = lineAt(expected, rpm);
		const can = absorbableTorqueNm(absorber, rpm);
		if (has > can && (!worst || has - can > worst.has - worst.can)) worst = { rpm, has, can };
	}
	return worst;
}

/**
 * Whether an engine's expected torque and top speed lie inside what a cell's machine can take up. Remarks, never refusals;
 * an empty list means that the recorded facts fit. It judges steady torque only: no torsional vibration, no shaft, no cooling.
 */
export function absorberRemarks(
	machine: AbsorberFacts,
	engine: EngineDemand,
	kind: RunKind | null
): Remark[] {
	const remarks: Remark[] = [];
	const absorber = atEngine(machine);
	const through = machine.gear ? ' through its gear' : '';
	if (kind === 'motoring' && BRAKES_ONLY.includes(absorber.kind))
		remarks.push({
			code: 'cannot_drive',
			message: `its machine (${absorber.kind.replace('_', ' ')}) brakes only and cannot motor an engine`
		});
	const topRpm = Math.max(engine.maxSpeedRpm ?? 0, engine.expectedTorque?.at(-1)?.[0] ?? 0);
	if (topRpm > absorber.maxSpeedRpm)
		remarks.push({
			code: 'speed',
			message: `the engine turns up to ${topRpm} rev/min, the machine ${Math.floor(absorber.maxSpeedRpm)} rev/min${through} at most`
		});
	// A motored engine gives no torque of its own to take up.
	const expected = kind === 'motoring' ? null : engine.expectedTorque;
	const excess = expected?.length ? worstExcess(absorber, expected) : null;
	if (excess)
		remarks.push({
			code: 'torque',
			message: `the engine is expected to give ${Math.round(excess.has)} N·m at ${Math.round(excess.rpm)} rev/min, the machine can hold ${Math.floor(excess.can)} N·m there${through}`
		});
	const unknown = [
		...(engine.maxSpeedRpm === null ? ['top speed'] : []),
		...(kind !== 'motoring' && !engine.expectedTorque?.length ? ['expected torque'] : [])
	];
	if (unknown.length)
		remarks.push({
			code: 'unknown',
			message: `whether the machine can take the engine up is unknown: its ${unknown.join(' and ')} ${unknown.length > 1 ? 'are' : 'is'} not recorded`
		});
	return remarks;
}
