import type { Attachment } from 'svelte/attachments';

interface Gestures {
	/** `share`: where across the plot the fingers or the pointer are, 0–1. */
	onzoom: (factor: number, share: number) => void;
	/** As a share of what is shown. */
	onpan: (share: number) => void;
}

/** Room left of the plot and right of it, px, which is no part of the time axis. */
interface Margins {
	left: number;
	right: number;
}

/**
 * Wheel and touch on a chart. The wheel zooms once the chart has focus (or with Ctrl), so that a page can be scrolled
 * past it; one finger pans along time and leaves the vertical to the page, two fingers zoom.
 */
export function gestures({ onzoom, onpan }: Gestures, { left, right }: Margins): Attachment<HTMLElement> {
	return (element) => {
		const fingers: Record<number, number> = {};
		const plotWidth = () => element.clientWidth - left - right;
		const shareOf = (clientX: number) =>
			(clientX - element.getBoundingClientRect().left - left) / plotWidth();

		function wheel(event: WheelEvent) {
			const hasFocus = element.contains(document.activeElement);
			const sideways = Math.abs(event.deltaX) > Math.abs(event.deltaY);
			if (!hasFocus && !event.ctrlKey) return;
			event.preventDefault();
			if (sideways) onpan(event.deltaX / plotWidth());
			else onzoom(Math.exp(event.deltaY / 400), shareOf(event.clientX));
		}
		function down(event: PointerEvent) {
			if (event.pointerType === 'touch') fingers[event.pointerId] = event.clientX;
		}
		function moved(event: PointerEvent) {
			const before = fingers[event.pointerId];
			if (before === undefined) return;
			const others = Object.entries(fingers).filter(([id]) => Number(id) !== event.pointerId);
			const other = others[0]?.[1];
			fingers[event.pointerId] = event.clientX;
			if (other === undefined) return onpan((before - event.clientX) / plotWidth());
			const [spread, spreadNow] = [Math.abs(before - other), Math.abs(event.clientX - other)];
			if (spread > 10 && spreadNow > 10) onzoom(spread / spreadNow, shareOf((event.clientX + other) / 2));
		}
		function up(event: PointerEvent) {
			delete fingers[event.pointerId];
		}
		element.addEventListener('wheel', wheel, { passive: false });
		element.addEventListener('pointerdown', down);
		element.addEventListener('pointermove', moved);
		element.addEventListener('pointerup', up);
		element.addEventListener('pointercancel', up);
		return () => {
			element.removeEventListener('wheel', wheel);
			element.removeEventListener('pointerdown', down);
			element.removeEventListener('pointermove', moved);
			element.removeEventListener('pointerup', up);
			element.removeEventListener('pointercancel', up);
		};
	};
}
