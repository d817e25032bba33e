import type { Window } from '../charts/window';

interface Coded {
	code: string;
}

/** What explains a run best, in the order of the panes. */
const TELLING = [
	'speed',
	'torque',
	'power',
	'throttle',
	'fuel_flow',
	'fuel_energy_flow',
	'lambda_sensor',
	'lambda_flow',
	'manifold_pressure',
	'exhaust_temp',
	'electrical_power'
];
const PANES = 4;

/**
 * The panes that a trace opens with: the telling channels that it has, else its first ones; what a flag or a finding with a
 * place on the trace speaks of comes after the first two.
 * @param said sentences of flags and codes of findings
 */
export function firstPanes(channels: readonly Coded[], said: readonly string[] = []): string[] {
	const codes = channels.map(({ code }) => code);
	const words = new Set(said.flatMap((sentence) => [sentence, ...sentence.split(/[^\w.]+/)]));
	const telling = TELLING.filter((code) => codes.includes(code));
	const rest = codes.filter((code) => !telling.includes(code));
	const spoken = codes.filter((code) => words.has(code));
	const chosen = [...new Set([...telling.slice(0, 2), ...spoken, ...telling, ...rest])].slice(0, PANES);
	return codes.filter((code) => chosen.includes(code));
}

/** What of a trace an address asks to see; what it does not say, or says wrongly, is left to the chart. */
export function readView(
	query: URLSearchParams,
	channels: readonly Coded[]
): { window: Window | undefined; shown: string[] | undefined } {
	const [from, to] = ['from', 'to'].map((name) => Number.parseFloat(query.get(name) ?? ''));
	const known = new Set(channels.map(({ code }) => code));
	const shown = query.getAll('show').filter((code) => known.has(code));
	return {
		window: from !== undefined && to !== undefined && to > from ? { from, to } : undefined,
		shown: shown.length > 0 ? shown.slice(0, 8) : undefined
	};
}

/** The address of a view; a window that is the whole trace needs no words. */
export function viewQuery(address: URL, view: { window: Window; shown: string[] }, whole: Window): URL {
	const next = new URL(address);
	for (const name of ['from', 'to', 'show']) next.searchParams.delete(name);
	if (view.window.from > whole.from || view.window.to < whole.to) {
		next.searchParams.set('from', view.window.from.toFixed(3));
		next.searchParams.set('to', view.window.to.toFixed(3));
	}
	for (const code of view.shown) next.searchParams.append('show', code);
	return next;
}
