import { tableValue } from '$lib/domain/limits/judge';
import { batchAfrStoich } from '$lib/domain/formulas/fuel';
import type { ModelFuel } from './engine-model';
import { ease } from './ease';
import { DEMO_CELLS, TORQUE_READS } from './lab/cells';
import type { DemoEngine } from './lab/engine';
import { DEMO_ENGINES, modelOf } from './lab/engines';
import { BURNS, DEMO_BATCHES } from './lab/fuels';
import { ENERGY_FLOW_TABLE } from './lab/limits';
import type { DemoRun } from './lab/run';
import { electricalProfile, steadyProfile, sweepProfile, type SweepPlan } from './profiles';
import { seededRandom } from './random';
import { asInstalled, pointAt, record, sweepTruth, type Bench, type Profile, type Truth } from './rig';
import { writeTraceFile } from './trace-file';

/** Below the energy-flow line by this share, the engine's control aims. */
const CONTROL_MARGIN = 0.018;
/** How long the control takes to go over the line and back, s. */
const CONTROL_EDGE_S = 0.15;
const STORE_MJ = 6;

export interface RunFile {
	bytes: Buffer;
	/** What the model did, without noise: figures of a sweep, points of steady states, spans over the energy-flow line. */
	truth: Truth;
	points: Truth[];
	spans: [fromS: number, toS: number][];
}

export function engineOf(run: Pick<DemoRun, 'build'>): DemoEngine {
	const engine = DEMO_ENGINES.find(({ builds }) => builds.some(({ number }) => number === run.build));
	if (!engine) throw new Error(`no demo engine has a build ${run.build}`);
	return engine;
}

function fuelOf(code: string): ModelFuel {
	const batch = DEMO_BATCHES.find((one) => one.code === code);
	const afrStoich = batch && batchAfrStoich(batch)?.value;
	if (!batch || afrStoich === undefined) throw new Error(`no demo batch ${code} with a composition`);
	return { lhvMjKg: batch.lhvMjKg.value, afrStoich, burn: BURNS[code] ?? 1 };
}

/** The bench of a run; the engine as it was that day. */
function benchOf(run: DemoRun): Bench {
	const engine = engineOf(run);
	const cell = DEMO_CELLS.find(({ code }) => code === run.cell);
	if (!cell) throw new Error(`no demo cell ${run.cell}`);
	const rotor = cell.torqueAt === 'stator' ? (cell.rotorInertiaKgM2 ?? 0) : 0;
	return {
		engine: asInstalled(modelOf(engine, run.build), seededRandom(`${run.filename} installed`)),
		air: run.air,
		fuel: fuelOf(run.batch),
		inertiaKgM2: engine.inertiaKgM2 + (cell.shaftInertiaKgM2 ?? 0) + rotor,
		torqueRangeNm: cell.absorber.maxTorqueNm,
		torqueReads: TORQUE_READS[cell.code] ?? 1,
		storeMj: STORE_MJ
	};
}

/** The recorded file of a demo run, the same at every call, with what is true about it. */
export function runFile(run: DemoRun): RunFile {
	const bench = benchOf(run);
	const told: Omit<RunFile, 'bytes'> = { truth: {}, points: [], spans: [] };
	const profile = profileOf(run, bench, told);
	const recording = record(bench, profile, run.rateHz, seededRandom(run.filename), run.disturbances);
	return { bytes: writeTraceFile(recording, run.columns, run.dialect), ...told };
}

function profileOf({ test }: DemoRun, bench: Bench, told: Omit<RunFile, 'bytes'>): Profile {
	switch (test.is) {
		case 'sweep':
			told.truth = sweepTruth(bench, test.plan.fromRpm, test.plan.toRpm);
			return sweepProfile(test.plan);
		case 'capped': {
			const aim = (rpm: number) =>
				(tableValue(ENERGY_FLOW_TABLE, rpm) * (1 - CONTROL_MARGIN)) / bench.fuel.lhvMjKg;
			told.truth = sweepTruth(bench, test.plan.fromRpm, test.plan.toRpm, aim);
			// The richest mixture lies inside an overshoot, which the line that the truth follows does not have.
			delete told.truth['lambda_flow_min'];
			told.spans = test.overshoots.map(overLine);
			return sweepProfile({ ...test.plan, fuelCap: cappedBy(test.overshoots, aim) });
		}
		case 'steady':
			told.points = test.points.map((point) => {
				const { torqueNm, powerKw, fuelFlowKgH, bte } = pointAt(bench, { ...point, rateRpmS: 0 });
				const reads = bench.torqueReads ?? 1;
				return {
					speed: point.speedRpm,
					torque: reads * torqueNm,
					power: reads * powerKw,
					fuel_flow: fuelFlowKgH,
					bte: reads * bte
				};
			});
			return steadyProfile(test.points, test.holdS);
		case 'electrical': {
			const profile = electricalProfile(test.stretches, test.speedRpm);
			told.truth = electricalTruth(profile);
			return profile;
		}
	}
}

interface Overshoot {
	atS: number;
	lastsS: number;
	by: number;
}

/** The share of the line that the control lets through: below it by the margin, above it while it overshoots. */
function cappedBy(overshoots: readonly Overshoot[], aim: (rpm: number) => number): SweepPlan['fuelCap'] {
	return (rpm, timeS) =>
		overshoots.reduce((cap, { atS, lastsS, by }) => {
			const up = ease(atS, atS + CONTROL_EDGE_S, timeS);
			const down = ease(atS + lastsS, atS + lastsS + CONTROL_EDGE_S, timeS);
			return cap * (1 + ((CONTROL_MARGIN + by) / (1 - CONTROL_MARGIN)) * (up - down));
		}, aim(rpm));
}

/** When the overshoot is above the line: the eased edge passes it at the share of the margin. */
function overLine({ atS, lastsS, by }: Overshoot): [number, number] {
	const share = CONTROL_MARGIN / (CONTROL_MARGIN + by);
	let s = 0;
	while (ease(0, 1, s) < share) s += 1e-4;
	return [atS + s * CONTROL_EDGE_S, atS + lastsS + (1 - s) * CONTROL_EDGE_S];
}

/** Energies of the electrical store by fine steps over the profile without noise. */
function electricalTruth(profile: Profile): Truth {
	const step = 1e-3;
	let [out, into, net, low, high] = [0, 0, 0, 0, 0];
	for (let timeS = step / 2; timeS < profile.durationS; timeS += step) {
		const mj = ((profile.at(timeS).electricalKw ?? 0) * step) / 1000;
		if (mj > 0) out += mj;
		else into -= mj;
		net += mj;
		low = Math.min(low, net);
		high = Math.max(high, net);
	}
	return {
		electrical_energy_out: out,
		electrical_energy_in: into,
		electrical_store_swing: high - low,
		duration: profile.durationS
	};
}
