import { vapourPressureAtKpa, vapourPressureKpa } from '../formulas/humid-air';
import type { Ambient } from '../model';

/** Named columns of one length: samples of a trace, bins of a curve or rows of a point table alike. */
export type Columns = ReadonlyMap<string, Float64Array>;

/** Air at the engine's inlet and in the room, one value per row; NaN where unknown. */
export interface Atmosphere {
	barometerKpa: Float64Array;
	ambientC: Float64Array;
	vapourKpa: Float64Array;
	/** Before filter or compressor; the room's where no channel is there. */
	inletKpa: Float64Array;
	inletC: Float64Array;
	inletVapourKpa: Float64Array;
}

export interface AtmosphereSources {
	barometer: boolean;
	temperature: boolean;
	humidity: boolean;
}

/** The channel where it is known, else the run's entry. A channel beats the entry, sample by sample. */
function filled(channel: Float64Array | undefined, entry: number | undefined, rows: number): Float64Array {
	const fallback = entry ?? NaN;
	if (!channel) return new Float64Array(rows).fill(fallback);
	return channel.map((value) => (Number.isNaN(value) ? fallback : value));
}

/** Which of the three the run knows, by channel or by entry. */
export function knownSources(columns: Columns, ambient: Ambient): AtmosphereSources {
	return {
		barometer: columns.has('barometer') || ambient.barometerKpa !== undefined,
		temperature:
			columns.has('inlet_temp') || columns.has('ambient_temp') || ambient.temperatureC !== undefined,
		humidity: columns.has('vapour_pressure') || columns.has('humidity') || ambient.humidityPct !== undefined
	};
}

/**
 * The air that the engine breathes: inlet channels, else the room's; never conditions after a compressor or cooler.
 * The vapour pressure is carried to the inlet's pressure. Without any humidity it is 0 for dry air (said as a finding elsewhere).
 */
export function atmosphereOf(columns: Columns, ambient: Ambient, rows: number): Atmosphere {
	const barometerKpa = filled(columns.get('barometer'), ambient.barometerKpa, rows);
	const ambientC = filled(columns.get('ambient_temp'), ambient.temperatureC, rows);
	const inletKpa = filled(columns.get('inlet_pressure'), undefined, rows);
	const inletC = filled(columns.get('inlet_temp'), undefined, rows);
	const humidity = filled(columns.get('humidity'), ambient.humidityPct, rows);
	const vapourKpa = filled(columns.get('vapour_pressure'), undefined, rows);
	const inletVapourKpa = new Float64Array(rows);
	let lastC = NaN;
	let lastHumidity = NaN;
	let lastVapour = NaN;
	for (let i = 0; i < rows; i++) {
		if (Number.isNaN(inletKpa[i]!)) inletKpa[i] = barometerKpa[i]!;
		if (Number.isNaN(inletC[i]!)) inletC[i] = ambientC[i]!;
		if (Number.isNaN(vapourKpa[i]!)) {
			// The hygrometer hangs in the room; where no room temperature is known the inlet's stands for it.
			const roomC = Number.isNaN(ambientC[i]!) ? inletC[i]! : ambientC[i]!;
			if (roomC !== lastC || humidity[i] !== lastHumidity) {
				lastC = roomC;
				lastHumidity = humidity[i]!;
				lastVapour = Number.isNaN(lastHumidity) ? 0 : vapourPressureKpa(lastHumidity, roomC);
			}
			vapourKpa[i] = lastVapour;
		}
		const barometer = Number.isNaN(barometerKpa[i]!) ? inletKpa[i]! : barometerKpa[i]!;
		inletVapourKpa[i] = vapourPressureAtKpa(vapourKpa[i]!, inletKpa[i]!, barometer);
	}
	return { barometerKpa, ambientC, vapourKpa, inletKpa, inletC, inletVapourKpa };
}
