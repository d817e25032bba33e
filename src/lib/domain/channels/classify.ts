import { sameKind } from '../units/dimensions';
import { parseUnit, refusedUnit, type Unit } from '../units/parse';
import { namedBy, noChannelBecause, type NamedChannel } from './aliases';
import { CATALOGUE, channelOf } from './catalogue';

export interface Classification {
	/** Canonical code, indexed where the header counts (`exhaust_temp.2`); null where nothing fits. */
	code: string | null;
	/** 0–1. Above 0.8 the header says it; below 0.5 it is a guess. */
	confidence: number;
	/** Short sentences for the person who is asked. */
	reasons: string[];
	unit: Unit | null;
}

/** A header as its words: lower case, accents spelled out, camelCase and separators apart. */
function wordsOf(name: string): string[] {
	return name
		.replace(/ä/gi, 'ae')
		.replace(/ö/gi, 'oe')
		.replace(/ü/gi, 'ue')
		.replace(/ß/g, 'ss')
		.replace(/λ/gi, 'lambda')
		.replace(/[φϕ]/gi, 'phi')
		.normalize('NFKD')
		.replace(/[\u0300-\u036f]/g, '')
		.replace(/([a-z])([A-Z])/g, '$1 $2')
		.toLowerCase()
		.split(/[^a-z0-9]+/)
		.filter((word) => word !== '');
}

/** Trailing number of a header: `EGT3`, `T_exh_2`, `exhaust temp cyl 4`. */
function takeIndex(words: readonly string[]): { words: string[]; index: number | null } {
	const last = words.at(-1) ?? '';
	const parts = /^(.*?[a-z])?(\d{1,2})$/.exec(last);
	if (!parts || words.join('').length === last.length - (parts[1]?.length ?? 0))
		return { words: [...words], index: null };
	const rest = [...words.slice(0, -1), ...(parts[1] ? [parts[1]] : [])];
	const bare = rest.filter(
		(word, at) => at < rest.length - 1 || !/^(cyl|cylinder|zyl|zylinder|no|nr|bank|port)$/.test(word)
	);
	return Number(parts[2]) > 0 ? { words: bare, index: Number(parts[2]) } : { words: [...words], index: null };
}

const fits = (code: string, unit: Unit | null) =>
	unit === null || sameKind(unit.dimension, CATALOGUE.get(code)?.dimension ?? 'ratio');

/** Where the header names the thing and the unit its kind: a flow by volume, a temperature under a pressure's name. */
const BY_UNIT: Readonly<Record<string, readonly string[]>> = {
	fuel_flow: ['fuel_flow_volume'],
	fuel_flow_volume: ['fuel_flow'],
	air_flow: ['air_flow_volume'],
	air_flow_volume: ['air_flow'],
	manifold_temp: ['manifold_pressure'],
	inlet_temp: ['inlet_pressure'],
	ambient_temp: ['barometer'],
	exhaust_temp: ['exhaust_pressure'],
	exhaust_pressure: ['exhaust_temp'],
	boost_pressure: ['manifold_temp'],
	speed: ['vehicle_speed']
};

const TEMPERATURE_WORD = /^(t|temp|temperature|temperatur)$/;
const PRESSURE_WORD = /^(p|press|pressure|druck)$/;

function withoutStation(words: readonly string[], unit: Unit | null): Classification | null {
	const kind = words.some((word) => TEMPERATURE_WORD.test(word))
		? 'temperature'
		: words.some((word) => PRESSURE_WORD.test(word))
			? 'pressure'
			: (unit?.dimension ?? null);
	if (kind === 'temperature')
		return {
			code: 'inlet_temp',
			confidence: 0.2,
			reasons: ['A temperature that does not say where it is taken.'],
			unit
		};
	if (kind === 'pressure')
		return {
			code: 'inlet_pressure',
			confidence: 0.2,
			reasons: ['A pressure that does not say where it is taken.'],
			unit
		};
	return null;
}

/** What a unit alone suggests, where the header says nothing. */
const BY_UNIT_ALONE: readonly (readonly [dimension: Unit['dimension'], code: string, confidence: number])[] =
	[
		['rotational_speed', 'speed', 0.6],
		['torque', 'torque', 0.6],
		['mass_flow', 'fuel_flow', 0.3],
		['volume_flow', 'fuel_flow_volume', 0.3],
		['power', 'power', 0.4]
	];

const nothing = (reason: string, unit: Unit | null): Classification => ({
	code: null,
	confidence: 0,
	reasons: [reason],
	unit
});

/**
 * Proposes the canonical channel of a column from its header and unit.
 *
 * @param name the header without its unit (`splitHeader`)
 * @param unitText the unit from the header or from a unit row; null or empty where none is given
 * @returns the best candidate with how sure it is and why. The unit decides where the header leaves it open (fuel flow in
 * L/h is `fuel_flow_volume`); a pressure or temperature without its station, and a unit of another kind than the
 * name asks for, are never sure. Nothing is guessed in silence: below 0.8 ask.
 */
export function classifyHeader(name: string, unitText: string | null): Classification {
	const unit = parseUnit(unitText);
	const refused = refusedUnit(unitText);
	if (refused) return nothing(refused, null);
	const all = wordsOf(name);
	if (all.length === 0) return nothing('The column has no name.', unit);
	const not = noChannelBecause(all);
	if (not) return nothing(not, unit);

	const counted = takeIndex(all);
	// `CO2` and `lambda 1` are names; in `T_exh_2` the number counts.
	const whole = namedBy(all);
	const isName = whole.some((match) => match.exact);
	const stem = isName || counted.index === null ? [] : namedBy(counted.words);
	const found = stem.length > 0 ? stem : whole;
	const index = stem.length > 0 ? counted.index : null;
	const reasons: string[] = [];
	if (unitText != null && unitText.trim() !== '' && unit === null)
		reasons.push(`The unit “${unitText.trim()}” is not known.`);

	const best = found.find((match) => fits(match.code, unit));
	if (best) return grade(best, all, index, unit, reasons);

	const named = found[0];
	const other = named && BY_UNIT[named.code]?.find((code) => fits(code, unit));
	if (named && other && unit) {
		reasons.push(`The header reads like ${named.code}; its unit ${unit.unit} makes it ${other}.`);
		return { code: coded(other, index), confidence: Math.min(0.9, named.score - 0.03), reasons, unit };
	}
	if (named && unit)
		return {
			code: coded(named.code, index),
			confidence: 0.1,
			reasons: [...reasons, `The header reads like ${named.code}, but ${unit.unit} is no unit of it.`],
			unit
		};
	const open = withoutStation(counted.words, unit);
	if (open) return open;
	const alone = unit && BY_UNIT_ALONE.find(([dimension]) => dimension === unit.dimension);
	if (alone)
		return {
			code: alone[1],
			confidence: alone[2] / 2,
			reasons: [...reasons, `Only the unit ${unit.unit} speaks for it.`],
			unit
		};
	return nothing('No known channel has this name.', unit);
}

function coded(code: string, index: number | null): string {
	return index !== null && channelOf(`${code}.${index}`) ? `${code}.${index}` : code;
}

/** A place or a letter alone: it needs its unit to say which quantity is meant. */
const NEEDS_UNIT =
	/^(coolant|exhaust|manifold|ambient|fuel|air|kraftstoff|kuehlwasser|kuehlmittel|boost|[a-mo-z]|alpha|p [a-z]|t [a-z])$/;

function grade(
	match: NamedChannel,
	words: readonly string[],
	index: number | null,
	unit: Unit | null,
	reasons: string[]
): Classification {
	const { code } = match;
	let confidence = match.score;
	if (reasons.length > 0) confidence = Math.min(confidence, 0.3);
	if (match.because) reasons.push(match.because);
	if (unit) {
		reasons.push(`Name and unit (${unit.unit}) agree.`);
	} else if (code !== 'time' && CATALOGUE.get(code)?.dimension !== 'ratio') {
		confidence = Math.min(confidence, NEEDS_UNIT.test(words.join(' ')) ? 0.4 : 0.7);
		reasons.push('The header gives no unit.');
	}
	return { code: coded(code, index), confidence, reasons, unit };
}
