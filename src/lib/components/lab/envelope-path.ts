import { absorbableTorqueNm, type AbsorberFacts } from '$lib/domain/scheduling/absorber';

const SAMPLES = 120;

export interface EnvelopePath {
	line: string;
	area: string;
	topTorqueNm: number;
}

/**
 * Torque that a cell's machine can hold over its speed range, drawn into a box of `width` × `height` from the lower left
 * corner: as recorded, or from the machine's own power and torque. Corners of a recorded envelope are kept.
 */
export function envelopePath(absorber: AbsorberFacts, width: number, height: number): EnvelopePath {
	const { maxSpeedRpm, envelope } = absorber;
	const even = Array.from({ length: SAMPLES + 1 }, (_, at) => (at / SAMPLES) * maxSpeedRpm);
	const corners = (envelope ?? []).map(([rpm]) => rpm).filter((rpm) => rpm <= maxSpeedRpm);
	const speeds = [...new Set([...even, ...corners])].sort((a, b) => a - b);
	const torques = speeds.map((rpm) => absorbableTorqueNm(absorber, rpm));
	const topTorqueNm = Math.max(...torques);
	const x = (rpm: number) => ((rpm / maxSpeedRpm) * width).toFixed(1);
	const y = (torque: number) => (height - (topTorqueNm > 0 ? torque / topTorqueNm : 0) * height).toFixed(1);
	const line = speeds.map((rpm, at) => `${at === 0 ? 'M' : 'L'}${x(rpm)} ${y(torques[at] ?? 0)}`).join('');
	return { line, area: `${line}V${height}H0Z`, topTorqueNm };
}
