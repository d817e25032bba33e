/**
 * WCAG 2.2 contrast ratio of two sRGB colours given as `#RRGGBB`, 1 (same) to 21 (black on white).
 * Source: WCAG 2.2, definitions "contrast ratio" and "relative luminance".
 */
export function contrast(a: string, b: string): number {
	const [lighter, darker] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number];
	return (lighter + 0.05) / (darker + 0.05);
}

function luminance(hex: string): number {
	const [r, g, b] = [1, 3, 5].map((at) => {
		const share = parseInt(hex.slice(at, at + 2), 16) / 255;
		return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
	}) as [number, number, number];
	return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}
