import { colour, seriesStyle, type Scheme } from '../theme/tokens';
import type { Place } from './trend-layout';

/** Groups beyond these look alike over time: six colours with six shapes are what people tell apart. */
export const TOLD_APART = 6;

interface Dot extends Place {
	/** Place of its group among the groups. */
	place: number;
}

interface Painting {
	scheme: Scheme;
	/** Part of the drawing that is seen, px. */
	left: number;
	width: number;
	height: number;
	/** Each group in its own colour and shape. */
	isTold: boolean;
}

const TURN = Math.PI * 2;

/** Shapes in the order of groups: disc, square, triangle, diamond, triangle down, cross. */
function trace(path: CanvasRenderingContext2D, shape: number, x: number, y: number, r: number): void {
	const polygon = (corners: number, turn: number) => {
		for (let n = 0; n < corners; n++) {
			const angle = turn + (n / corners) * TURN;
			path[n === 0 ? 'moveTo' : 'lineTo'](x + Math.cos(angle) * r * 1.2, y + Math.sin(angle) * r * 1.2);
		}
		path.closePath();
	};
	if (shape === 1) polygon(4, Math.PI / 4);
	else if (shape === 2) polygon(3, -Math.PI / 2);
	else if (shape === 3) polygon(4, 0);
	else if (shape === 4) polygon(3, Math.PI / 2);
	else if (shape === 5) {
		path.moveTo(x - r, y - r);
		path.lineTo(x + r, y + r);
		path.moveTo(x + r, y - r);
		path.lineTo(x - r, y + r);
	} else {
		path.moveTo(x + r, y);
		path.arc(x, y, r, 0, TURN);
	}
}

/** Paints the runs of the part that is seen: one canvas of the screen's width, however wide the drawing is. */
export function paintDots(canvas: HTMLCanvasElement, dots: readonly Dot[], painting: Painting): void {
	const { scheme, left, width, height, isTold } = painting;
	const ratio = devicePixelRatio || 1;
	if (canvas.width !== Math.round(width * ratio) || canvas.height !== Math.round(height * ratio)) {
		canvas.width = Math.round(width * ratio);
		canvas.height = Math.round(height * ratio);
	}
	const brush = canvas.getContext('2d');
	if (!brush) return;
	brush.setTransform(ratio, 0, 0, ratio, -left * ratio, 0);
	brush.clearRect(left, 0, width, height);
	const isCrowded = dots.length > 800;
	const r = isCrowded ? 2.5 : 3.5;
	brush.lineWidth = isCrowded ? 1 : 1.5;
	brush.fillStyle = colour('sheet', scheme);
	// A path for each look, not for each dot.
	for (let look = 0; look < (isTold ? TOLD_APART : 1); look++) {
		brush.beginPath();
		for (const { cx, cy, place } of dots) {
			if ((isTold && place % TOLD_APART !== look) || cx < left - 8 || cx > left + width + 8) continue;
			trace(brush, isTold ? look : 0, cx, cy, r);
		}
		brush.strokeStyle = isTold ? seriesStyle(look, scheme).colour : colour('ink', scheme);
		if (!isCrowded) brush.fill();
		brush.stroke();
	}
}
