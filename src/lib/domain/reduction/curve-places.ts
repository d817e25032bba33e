import type { Columns } from '../trace/atmosphere';
import { LOCAL_FIT, localPeak, localValue, seriesOf } from './local-peak';
import type { Place, PlacedValue, Places } from './places';

/**
 * Extremes of a curve over speed by local fit, inside the measured speeds.
 *
 * @param weights samples behind each bin
 */
export function curvePlaces(curve: Columns, weights: Float64Array, range: readonly [number, number]): Places {
	const speed = curve.get('speed') ?? new Float64Array();
	const series = (code: string) => {
		const values = curve.get(code);
		return values ? seriesOf(speed, values, weights) : null;
	};
	return {
		method: LOCAL_FIT,
		codes: () => [...curve.keys()],
		peak(code, sign): PlacedValue | null {
			const curveOf = series(code);
			const found = curveOf && localPeak(curveOf, range, sign);
			return found && { value: found.value, u: found.u, key: found.x, at: { speed: found.x } };
		},
		valueAt(code, place: Place) {
			const curveOf = series(code);
			return curveOf && localValue(curveOf, place.key);
		}
	};
}

/** Extremes of rows that are points already: the row itself, no fit. */
export function rowPlaces(
	columns: Columns,
	method: string,
	scatter?: (code: string, row: number) => number | null,
	time?: Float64Array | null
): Places {
	const at = (row: number): PlacedValue['at'] => ({
		...finite('speed', columns.get('speed')?.[row]),
		...finite('torque', columns.get('torque')?.[row]),
		...finite('time', time?.[row])
	});
	return {
		method,
		codes: () => [...columns.keys()],
		peak(code, sign) {
			const values = columns.get(code);
			if (!values) return null;
			let best = -1;
			for (let i = 0; i < values.length; i++)
				if (Number.isFinite(values[i]!) && (best < 0 || sign * values[i]! > sign * values[best]!)) best = i;
			if (best < 0) return null;
			return { value: values[best]!, u: scatter?.(code, best) ?? null, key: best, at: at(best) };
		},
		valueAt(code, place) {
			const value = columns.get(code)?.[place.key] ?? NaN;
			return !Number.isFinite(value) ? null : { value, u: scatter?.(code, place.key) ?? null };
		}
	};
}

function finite<K extends string>(key: K, value: number | undefined): Partial<Record<K, number>> {
	return value === undefined || !Number.isFinite(value) ? {} : ({ [key]: value } as Record<K, number>);
}
