import { sameKind } from './dimensions';
import { parseUnit, type Unit } from './parse';

/** Percent, ratio and ppm measure one thing: how much of the whole one unit of each is. */
const PART_OF_WHOLE = { percent: 1e-2, ratio: 1, concentration: 1e-6 } as const;

/**
 * The function that takes a value in `from` to `to`.
 *
 * @returns null where the two measure different things (a torque is not an energy, a mass flow is not a volume flow)
 */
export function converter(from: Unit, to: Unit): ((value: number) => number) | null {
	if (!sameKind(from.dimension, to.dimension)) return null;
	if (from.unit === to.unit) return (value) => value;
	if (from.dimension === to.dimension) return (value) => to.fromInternal(from.toInternal(value));
	// kW and MJ/h: 1 kW is 3.6 MJ/h.
	if (from.dimension === 'power') return (value) => to.fromInternal(from.toInternal(value) * 3.6);
	if (from.dimension === 'energy_flow') return (value) => to.fromInternal(from.toInternal(value) / 3.6);
	const parts: Partial<Record<string, number>> = PART_OF_WHOLE;
	const step = (parts[from.dimension] ?? NaN) / (parts[to.dimension] ?? NaN);
	return (value) => to.fromInternal(from.toInternal(value) * step);
}

/**
 * A whole column at once; NaN stays NaN.
 *
 * @param to the wanted unit; left out, the internal unit of the column's dimension
 * @throws where the units measure different things: a programming error, since a channel map is checked first
 */
export function convertArray(values: ArrayLike<number>, from: Unit, to?: Unit | string): Float64Array {
	const target = typeof to === 'string' ? parseUnit(to) : to;
	if (target === null) throw new Error(`Unknown unit: ${String(to)}`);
	const convert = target ? converter(from, target) : from.toInternal;
	if (!convert) throw new Error(`${from.unit} cannot become ${target?.unit ?? ''}`);
	return Float64Array.from(values, convert);
}
