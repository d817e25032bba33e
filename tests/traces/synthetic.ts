import type { RunContext } from '../../src/lib/domain/model';

/** A seeded source of uniform numbers (mulberry32), so that a failure can be made again. */
export function seeded(seed: number): () => number {
	let state = seed | 0;
	return () => {
		state = (state + 0x6d2b79f5) | 0;
		let t = Math.imul(state ^ (state >>> 15), 1 | state);
		t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
		return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
	};
}

const gauss = (random: () => number) =>
	Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());

const LHV = 42.7;
const INERTIA_TO_NM = (2 * Math.PI) / 60;

export interface Engine {
	loRpm: number;
	hiRpm: number;
	torque(rpm: number): number;
	bte(rpm: number): number;
}

/** An engine with parabolic torque and efficiency over speed. */
export function engineOf(random: () => number): Engine {
	const loRpm = 800 + 2500 * random();
	const span = 1500 + 7000 * random();
	const torqueAt = loRpm + span * (0.35 + 0.3 * random());
	const most = 40 + 500 * random();
	const droop = 0.12 + 0.35 * random();
	const bteAt = loRpm + span * (0.25 + 0.4 * random());
	const best = 0.25 + 0.15 * random();
	const fall = 0.1 + 0.12 * random();
	const parabola = (rpm: number, at: number, share: number) => 1 - share * ((rpm - at) / (0.6 * span)) ** 2;
	return {
		loRpm,
		hiRpm: loRpm + span,
		torque: (rpm) => most * parabola(rpm, torqueAt, droop),
		bte: (rpm) => best * parabola(rpm, bteAt, fall)
	};
}

export interface Part {
	seconds: number;
	/** Speed over the part, from 0 to 1 of its time. */
	rpm(share: number): number;
	/** Share of full load; also the throttle in per cent of its travel. */
	load: number;
}

export interface Sample {
	t: number;
	n: number;
	torque: number;
	fuel: number;
	throttle: number;
}

export interface Recording {
	rateHz: number;
	/** Relative scatter of torque and fuel, one standard deviation. */
	noise: number;
	/** Inertia between engine and the place where torque is measured, kg·m². */
	inertiaKgM2?: number;
}

const SPEED_NOISE = 0.0005;

export function record(
	engine: Engine,
	parts: readonly Part[],
	recording: Recording,
	random: () => number
): Sample[] {
	const samples: Sample[] = [];
	const step = 1 / recording.rateHz;
	let start = 0;
	for (const part of parts) {
		const count = Math.round(part.seconds * recording.rateHz);
		for (let k = 0; k < count; k++) {
			const n = part.rpm(k / count);
			const slope = (part.rpm((k + 1) / count) - n) / step;
			const made = engine.torque(n) * part.load;
			const shaft = made - (recording.inertiaKgM2 ?? 0) * slope * INERTIA_TO_NM;
			const fuel =
				Math.max((2 * Math.PI * n * made) / 60_000 / engine.bte(n) / LHV, 0) * 3.6 +
				(part.load > 0 ? 0 : 0.2);
			samples.push({
				t: start + k * step,
				n: n * (1 + SPEED_NOISE * gauss(random)),
				torque: shaft * (1 + recording.noise * gauss(random)),
				fuel: fuel * (1 + recording.noise * gauss(random)),
				throttle: 100 * part.load * (1 + 0.001 * gauss(random))
			});
		}
		start += count * step;
	}
	return samples;
}

/** How a measuring system would write the samples. */
export interface Writing {
	delimiter: string;
	decimal: '.' | ',';
	encoding: 'utf-8' | 'utf-16le' | 'latin1';
	headers: readonly [time: string, speed: string, torque: string, fuel: string];
	unitRow?: readonly string[];
	preamble?: readonly string[];
	/** Factors by which the numbers are written, for the headers' units. */
	scale?: readonly [number, number, number, number];
	clock?: boolean;
	quoted?: boolean;
	/** Fuel is written in every so many rows only. */
	fuelEvery?: number;
	throttle?: boolean;
}

export const PLAIN: Writing = {
	delimiter: ',',
	decimal: '.',
	encoding: 'utf-8',
	headers: ['time [s]', 'speed [rpm]', 'torque [Nm]', 'fuel flow [kg/h]']
};

function clockText(seconds: number): string {
	const ms = Math.round((86_390 + seconds) * 1000) % 86_400_000;
	const two = (value: number, digits = 2) => String(value).padStart(digits, '0');
	return `${two(Math.floor(ms / 3_600_000))}:${two(Math.floor(ms / 60_000) % 60)}:${two(Math.floor(ms / 1000) % 60)}.${two(ms % 1000, 3)}`;
}

export function write(samples: readonly Sample[], writing: Writing): Uint8Array {
	const [st, sn, sm, sf] = writing.scale ?? [1, 1, 1, 1];
	const cell = (text: string) => {
		const mark = writing.decimal === ',' ? text.replace('.', ',') : text;
		return writing.quoted || mark.includes(writing.delimiter) ? `"${mark}"` : mark;
	};
	const row = (cells: readonly string[]) => cells.map(cell).join(writing.delimiter);
	const lines = [
		...(writing.preamble ?? []),
		row([...writing.headers, ...(writing.throttle ? ['Throttle [%]'] : [])]),
		...(writing.unitRow ? [row(writing.unitRow)] : []),
		...samples.map(({ t, n, torque, fuel, throttle }, at) =>
			row([
				writing.clock ? clockText(t) : (t * st).toFixed(4),
				(n * sn).toFixed(2),
				(torque * sm).toFixed(3),
				writing.fuelEvery && at % writing.fuelEvery !== 0 ? '' : (fuel * sf).toFixed(5),
				...(writing.throttle ? [throttle.toFixed(1)] : [])
			])
		)
	];
	const text = lines.join('\r\n') + '\r\n';
	if (writing.encoding === 'utf-8') return new TextEncoder().encode(text);
	if (writing.encoding === 'latin1') return Uint8Array.from(text, (character) => character.charCodeAt(0));
	const bytes = new Uint8Array(2 + 2 * text.length);
	const view = new DataView(bytes.buffer);
	view.setUint16(0, 0xfeff, true);
	for (let i = 0; i < text.length; i++) view.setUint16(2 + 2 * i, text.charCodeAt(i), true);
	return bytes;
}

export interface KnownFigures {
	peak_power: number;
	peak_power_speed: number;
	peak_torque: number;
	peak_torque_speed: number;
	bte_max: number;
	bte_max_speed: number;
	fuel_flow_max: number;
}

/** The figures that the engine itself has, by looking at every rev/min. */
export function figuresOf({ loRpm, hiRpm, torque, bte }: Engine): KnownFigures {
	const known: KnownFigures = {
		peak_power: 0,
		peak_power_speed: 0,
		peak_torque: 0,
		peak_torque_speed: 0,
		bte_max: 0,
		bte_max_speed: 0,
		fuel_flow_max: 0
	};
	for (let n = loRpm; n <= hiRpm; n++) {
		const power = (2 * Math.PI * n * torque(n)) / 60_000;
		if (power > known.peak_power) Object.assign(known, { peak_power: power, peak_power_speed: n });
		if (torque(n) > known.peak_torque) Object.assign(known, { peak_torque: torque(n), peak_torque_speed: n });
		if (bte(n) > known.bte_max) Object.assign(known, { bte_max: bte(n), bte_max_speed: n });
		known.fuel_flow_max = Math.max(known.fuel_flow_max, (3.6 * power) / bte(n) / LHV);
	}
	return known;
}

export function sweepContext(changes: Partial<RunContext> = {}): RunContext {
	return {
		kind: 'power_sweep',
		engine: {
			displacementL: 2,
			cylinders: 4,
			strokesPerCycle: 4,
			ignition: 'spark',
			induction: null,
			inertiaKgM2: null,
			maxSpeedRpm: null,
			expectedTorque: null
		},
		cell: { torqueAt: 'flange', rotorInertiaKgM2: null, shaftInertiaKgM2: null },
		fuel: { lhvMjKg: { value: LHV } },
		ambient: {},
		correction: 'none',
		settings: {},
		rules: [],
		...changes
	};
}
