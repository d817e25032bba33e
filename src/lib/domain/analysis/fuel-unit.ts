import type { FuelFacts } from '../model';
import type { TraceColumn } from '../trace/trace';
import { parseUnit } from '../units/parse';

export interface UnitSuggestion {
	header: string;
	mappedUnit: string;
	unit: string;
	/** Efficiency that the other unit would give, a fraction. */
	bte: number;
}

/** Units that fuel meters write, the commonest first. */
const CANDIDATES = ['kg/h', 'lb/h', 'g/s', 'g/min', 'kg/min', 'kg/s', 'mg/s', 'L/h', 'mL/min', 'US gal/h'];
const PLAUSIBLE: readonly [number, number] = [0.2, 0.48];
const USUAL = 0.34;
const LAMBDA_NEAR = 0.06;

/**
 * The unit of the fuel column that would make the efficiency plausible; one under which lambda by flow and by sensor agree is
 * preferred.
 *
 * @param bte efficiency by the unit in force, a fraction @param lambdaRatio lambda by flow over lambda by sensor; NaN where unknown
 */
export function suggestFuelUnit(
	column: TraceColumn | null,
	bte: number,
	lambdaRatio: number,
	fuel: FuelFacts
): UnitSuggestion | null {
	const mapped = parseUnit(column?.sourceUnit);
	if (!column || !mapped || mapped.dimension !== 'mass_flow') return null;
	const density = fuel.densityKgM3?.value;
	let best: { unit: string; bte: number; score: number } | null = null;
	for (const name of CANDIDATES) {
		const unit = parseUnit(name);
		if (!unit || unit.unit === mapped.unit) continue;
		const perUnit =
			unit.dimension === 'volume_flow' ? (unit.toInternal(1) * (density ?? NaN)) / 1000 : unit.toInternal(1);
		const times = perUnit / mapped.toInternal(1);
		const would = bte / times;
		if (!(would >= PLAUSIBLE[0] && would <= PLAUSIBLE[1])) continue;
		const lambdaAgrees = Math.abs(lambdaRatio / times - 1) < LAMBDA_NEAR;
		const score =
			Math.abs(Math.log(would / USUAL)) -
			(lambdaAgrees ? 10 : 0) +
			(unit.dimension === 'volume_flow' ? 1 : 0);
		if (best === null || score < best.score) best = { unit: unit.unit, bte: would, score };
	}
	return best && { header: column.header, mappedUnit: mapped.unit, unit: best.unit, bte: best.bte };
}
