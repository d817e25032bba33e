import type { Finding, Flag, Span } from '$lib/domain/model';
import { statusOf, type Tone } from '../figures/status';

/** One row under a trace: a rule or a finding with its spans. */
export interface SpanRow {
	key: string;
	kind: 'flag' | 'finding';
	state: string;
	tone: Tone;
	title: string;
	message: string;
	spans: readonly Span[];
	/** Channel whose pane is shaded; null: all panes. */
	channel: string | null;
}

/** Flags first, worst first, then findings; what has no place on the clock has no row. */
export function spanRows(flags: readonly Flag[], findings: readonly Finding[]): SpanRow[] {
	const weight: Record<string, number> = { breach: 0, review: 1, note: 2, error: 3, warning: 4, info: 5 };
	const rows = [
		...flags.map((flag, n): SpanRow => ({
			key: `flag-${n}`,
			kind: 'flag',
			state: flag.severity,
			tone: statusOf('flag', flag.severity).tone,
			title: flag.rule,
			message: flag.message,
			spans: flag.spans,
			channel: null
		})),
		...findings.map((finding, n): SpanRow => ({
			key: `finding-${n}`,
			kind: 'finding',
			state: finding.severity,
			tone: statusOf('finding', finding.severity).tone,
			title: finding.message,
			message: finding.message,
			spans: finding.spans,
			channel: finding.channel ?? null
		}))
	];
	return rows
		.filter((row) => row.spans.length > 0)
		.sort((a, b) => (weight[a.state] ?? 9) - (weight[b.state] ?? 9));
}

/** Spans to shade in the pane of a channel; notes are not shaded. */
export function shadesOf(rows: readonly SpanRow[], code: string) {
	return rows.flatMap(({ channel, tone, spans }) =>
		(channel === null || channel === code) && (tone === 'attention' || tone === 'limit')
			? [{ spans, tone }]
			: []
	);
}
