import { parseUnit, refusedUnit } from '../units/parse';

const isUnit = (text: string) => parseUnit(text) !== null || refusedUnit(text) !== null;

/** One letter after an underscore is more often a place (`P_A`, `T_F`) than a unit: only these, and only after a real word. */
const ONE_LETTER = /^[sKCF]$/;

/**
 * Takes a header apart: `speed [rpm]`, `Torque (ft-lb)`, `T / °C`, `Speed, rpm`, `speed_radps`, `MAP kPa`, and a header that
 * is only a unit (`RPM`), which is then both.
 *
 * @returns the name without its unit, trimmed, and the unit's text as found; null where the header names none
 */
export function splitHeader(header: string): { name: string; unit: string | null } {
	const text = header
		.replace(/[\uFEFF\0]/g, '')
		.replace(/\s+/g, ' ')
		.trim()
		.replace(/^["']+|["']+$/g, '')
		.trim();
	const bracketed = /^(.*?)\s*[[({<]\s*([^[\](){}<>]*(?:\([^()]*\)[^[\](){}<>]*)*)\s*[\])}>]+\s*$/.exec(text);
	if (bracketed) {
		const [, name = '', unit = ''] = bracketed;
		if (name !== '') return { name: name.trim(), unit: unit.trim() === '' ? null : unit.trim() };
		return isUnit(unit) ? { name: unit.trim(), unit: unit.trim() } : { name: unit.trim(), unit: null };
	}
	if (isUnit(text) && !/^[A-Za-z]$|^[-–]+$|_/.test(text)) return { name: text, unit: text };
	const parted = /^(.+?)\s*[,;:]\s*(\S.*)$/.exec(text) ?? /^(.+?)\s+\/\s+(\S.*)$/.exec(text);
	if (parted && isUnit(parted[2]!)) return { name: parted[1]!.trim(), unit: parted[2]!.trim() };
	const tail = /^(.+?)[_ ]([^_ ]+)$/.exec(text);
	if (tail) {
		const [, name = '', unit = ''] = tail;
		const lone = unit.length === 1;
		if (isUnit(unit) && !/^[-–]+$|^\d+$/.test(unit) && !/^(lambda|ratio|none|at|ch|deg|CA)$/i.test(unit))
			if (!lone || (ONE_LETTER.test(unit) && (name.length > 1 || unit === 's')))
				return { name: name.trim(), unit };
	}
	return { name: text, unit: null };
}
