import { readFileSync } from 'node:fs';
import { analyseFile, type AnalysedFile } from '../../src/lib/domain/analysis';
import type { Correction, RunContext, RunKind } from '../../src/lib/domain/model';

/** What is known of an invented trace: the model it was made by, and the figures that the model has. */
export interface Truth {
	kind: string;
	engine: {
		displacement_l: number;
		rev_per_cycle: number;
		lhv_mj_per_kg: number;
		afr_stoich: number;
		inertia_kgm2: number;
	};
	ambient: { barometer_kpa: number; ambient_temp_degc: number; humidity_pct: number };
	metrics?: Record<string, number>;
	points?: Record<'speed' | 'torque' | 'fuel' | 'air' | 'power' | 'bte' | 'bsfc', number>[];
	findings?: string[];
	limit?: { over: string; table: [number, number][]; hold_s: number };
	expected_spans_s?: [number, number][];
	not_a_flag?: [number, number][];
	worst_over_limit_pct?: number;
}

const folder = new URL('./', import.meta.url);

const all = JSON.parse(readFileSync(new URL('truth.json', folder), 'utf8')) as Record<string, Truth>;

export function truthOf(file: string): Truth {
	const truth = all[file];
	if (!truth) throw new Error(`truth.json knows no ${file}`);
	return truth;
}

export const bytesOf = (file: string) => new Uint8Array(readFileSync(new URL(file, folder)));

const KINDS: Record<string, RunKind> = {
	'power sweep': 'power_sweep',
	'steady points': 'steady_points',
	'free log': 'free_log'
};

/** The two traces that come from the compression-ignition engine. */
const DIESEL = ['sweep-semicolon-latin1.csv', 'steady-points.csv'];

/** The run of a trace as it would be entered: engine, fuel and ambient of its truth. */
export function contextOf(file: string, changes: Partial<RunContext> = {}): RunContext {
	const truth = file.startsWith('broken-') ? truthOf('sweep-plain.csv') : truthOf(file);
	const diesel = DIESEL.includes(file);
	return {
		kind: KINDS[truth.kind] ?? 'power_sweep',
		engine: {
			displacementL: truth.engine.displacement_l,
			cylinders: 4,
			strokesPerCycle: truth.engine.rev_per_cycle === 2 ? 4 : 2,
			ignition: diesel ? 'compression' : 'spark',
			induction: diesel ? 'turbo' : null,
			inertiaKgM2: truth.engine.inertia_kgm2,
			maxSpeedRpm: null,
			expectedTorque: null
		},
		cell: { torqueAt: 'flange', rotorInertiaKgM2: null, shaftInertiaKgM2: null },
		fuel: { lhvMjKg: { value: truth.engine.lhv_mj_per_kg }, afrStoich: { value: truth.engine.afr_stoich } },
		ambient: {
			barometerKpa: truth.ambient.barometer_kpa,
			temperatureC: truth.ambient.ambient_temp_degc,
			humidityPct: truth.ambient.humidity_pct
		},
		correction: 'none',
		settings: {},
		rules: [],
		...changes
	};
}

export type Ready = Extract<AnalysedFile, { state: 'ready' }>;

/** Analyses a trace that must be ready; says why where it is not. */
export function ready(bytes: Uint8Array, context: RunContext, name = 'trace.csv'): Ready {
	const analysed = analyseFile(bytes, context, { name });
	if (analysed.state !== 'ready') throw new Error(`${name} is ${analysed.state}: ${analysed.error}`);
	return analysed;
}

export const readyFile = (file: string, changes: Partial<RunContext> = {}) =>
	ready(bytesOf(file), contextOf(file, changes), file);

export function metric(analysed: Ready, code: string): number {
	const found = analysed.metrics[code];
	if (!found) throw new Error(`no figure ${code}; there are ${Object.keys(analysed.metrics).join(', ')}`);
	return found.value;
}

export const warnings = (analysed: Ready) => analysed.findings.filter(({ severity }) => severity !== 'info');

/** Truth's name of a correction's factor → the correction that makes it. */
export const CORRECTION_FACTORS: Record<string, Correction> = {
	cf_j1349: 'sae_j1349',
	cf_iso1585_si: 'iso_1585',
	cf_din70020: 'din_70020'
};

/** How far a figure may be from the truth: a share of it, or an amount. */
export function tolerance(code: string, truth: number): number {
	if (code === 'bte_max_speed') return 350;
	if (code.endsWith('_speed')) return 150;
	if (code.startsWith('bte')) return 0.004;
	const wide = ['lambda_flow_at_peak_power', 'fuel_flow_max', 'fuel_energy_flow_max', 'air_flow_max'];
	return (wide.includes(code) ? 0.007 : 0.005) * Math.abs(truth);
}
