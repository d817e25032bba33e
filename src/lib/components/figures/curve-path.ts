import type { Curve } from '$lib/domain/model';

export const MARK_WIDTH = 72;
export const MARK_HEIGHT = 24;
/** Room for half the bold stroke. */
const INSET = 2;
/** Torque keeps to the upper part, so that the two lines cross once or not at all. */
const TORQUE_FOOT = 15;
/** A line that moves by less than this share of its peak is drawn as nearly flat, not blown up to full height. */
const LEAST_RANGE = 0.3;
/** More would not show on 72 px and would swell every table. */
const MOST_POINTS = 36;

export interface MarkPaths {
	torque: string;
	power: string;
}

/**
 * The two lines of a curve mark from a reduced curve: torque and power over speed, each over its own range.
 * Null when there are not two points to join. A gap in a line stays a gap. Points held one after another, whose speed does
 * not rise from one to the next, are no line: they are drawn as dots.
 */
export function curvePaths(curve: Curve | null | undefined): MarkPaths | null {
	const speed = curve?.speed ?? [];
	const known = speed.filter((rpm): rpm is number => rpm !== null);
	const [low, high] = [Math.min(...known), Math.max(...known)];
	if (!(high > low)) return null;
	const x = (rpm: number) => INSET + ((rpm - low) / (high - low)) * (MARK_WIDTH - 2 * INSET);
	const draw = rises(speed) ? line : dots;
	const torque = draw(speed, curve?.torque ?? [], x, TORQUE_FOOT);
	const power = draw(speed, curve?.power ?? [], x, MARK_HEIGHT - INSET);
	return torque || power ? { torque, power } : null;
}

/** Whether every speed is above the one before: what can be joined by a line. */
export function rises(speed: Curve[string]): boolean {
	const known = speed.filter((rpm): rpm is number => rpm !== null);
	return known.every((rpm, at) => at === 0 || rpm > known[at - 1]!);
}

/** Null where there is nothing above zero to draw. */
function heights(values: Curve[string], foot: number) {
	const known = values.filter((value): value is number => value !== null);
	const peak = Math.max(...known);
	if (!(peak > 0)) return null;
	const range = Math.max(peak - Math.min(...known), LEAST_RANGE * peak);
	return { peak, y: (value: number) => INSET + ((peak - value) / range) * (foot - INSET) };
}

/** Strokes without length: their round caps are the dots. */
function dots(speed: Curve[string], values: Curve[string], x: (rpm: number) => number, foot: number): string {
	const scale = heights(values, foot);
	if (!scale) return '';
	return speed
		.map((rpm, at) => {
			const value = values[at] ?? null;
			return rpm === null || value === null ? '' : `M${x(rpm).toFixed(1)} ${scale.y(value).toFixed(1)}h0`;
		})
		.join('');
}

function line(speed: Curve[string], values: Curve[string], x: (rpm: number) => number, foot: number): string {
	const scale = heights(values, foot);
	if (!scale) return '';
	const { peak, y } = scale;
	const stride = Math.max(1, Math.ceil(speed.length / MOST_POINTS));
	let path = '';
	let pen = 'M';
	speed.forEach((rpm, at) => {
		const value = values[at] ?? null;
		const isPeak = value === peak;
		if (at % stride !== 0 && at !== speed.length - 1 && !isPeak) return;
		if (rpm === null || value === null) pen = 'M';
		else {
			path += `${pen}${x(rpm).toFixed(1)} ${y(value).toFixed(1)}`;
			pen = 'L';
		}
	});
	return path;
}
