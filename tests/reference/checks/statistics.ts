import { fitAt } from '../../../src/lib/domain/statistics/local-fit';
import { mean, median, standardDeviation, summarise } from '../../../src/lib/domain/statistics/moments';
import { tCumulative, tQuantile } from '../../../src/lib/domain/statistics/student-t';
import { welchDifference } from '../../../src/lib/domain/statistics/welch';
import { ENTRIES, input, inputList, type Check, type Entry } from '../entries';

/** `1.2 then 500 x (1.1,1.3)`: the rule by which the numerical-accuracy sets are made. */
function byRule(rule: string): number[] {
	if (rule.startsWith('[')) return JSON.parse(rule) as number[];
	const [, first, times, low, high] = /^([\d.]+) then (\d+) x \(([\d.]+),([\d.]+)\)$/.exec(rule)!;
	return [Number(first), ...Array.from({ length: Number(times) }, () => [Number(low), Number(high)]).flat()];
}

const origin = (entry: Entry): Entry => {
	const other = entry.inputs.sameDataAs?.value;
	return other === undefined ? entry : ENTRIES.find((candidate) => candidate.id === other)!;
};

const data = (entry: Entry): number[] => {
	const y = origin(entry).inputs.y?.value;
	return typeof y === 'string' ? byRule(y) : inputList(origin(entry), 'y');
};

const line = (entry: Entry) => {
	const [x, y] = [inputList(origin(entry), 'x'), inputList(origin(entry), 'y')];
	const fit = fitAt(x, y, 0, x.length, 0, 1)!;
	const residuals = x.map((value, i) => y[i]! - fit[0]! - fit[1]! * value);
	return { fit, sse: residuals.reduce((sum, r) => sum + r * r, 0), n: x.length };
};

const critical = (entry: Entry, confidence: number) =>
	inputList(entry, 'df').map((df) => tQuantile((1 + confidence) / 2, df));

/** The two groups of an entry, given as their summary or as their values. */
const groups = (entry: Entry) =>
	entry.inputs.g1
		? ([summarise(inputList(entry, 'g1')), summarise(inputList(entry, 'g2'))] as const)
		: ([1, 2] as const).map((n) => ({
				n: input(entry, `n${n}`),
				mean: input(entry, `mean${n}`),
				sd: input(entry, `sd${n}`)
			}));

const welch = (entry: Entry) => {
	const [one, other] = groups(entry);
	const { value, standardError, df } = welchDifference(one!, other!)!;
	return { t: value / standardError, df };
};

export const STATISTICS_CHECKS: readonly Check[] = [
	{ match: /^cfr1065\.602-mean$/, run: (e) => mean(inputList(e, 'y')) },
	{ match: /^cfr1065\.602-accuracy$/, run: (e) => Math.abs(mean(inputList(e, 'y')) - input(e, 'yref')) },
	{ match: /^cfr1065\.602-sd$/, run: (e) => standardDeviation(inputList(e, 'y')) },
	{ match: /^cfr1065\.602-median-/, run: (e) => median(inputList(e, 'y')) },
	{ match: /^cfr1065\.602-tcrit90$/, run: (e) => critical(e, 0.9) },
	{ match: /^cfr1065\.602-tcrit95$/, run: (e) => critical(e, 0.95) },
	{ match: /^gum-(H1-k99|G2-)/, run: (e) => tQuantile((1 + input(e, 'p')) / 2, input(e, 'nu')) },
	{ match: /^(ehandbook-t2|r-sleep)-welch(-t)?$/, run: (e) => welch(e).t },
	{ match: /^r-sleep-welch-df$/, run: (e) => welch(e).df },
	{ match: /^r-sleep-welch-p$/, run: (e) => 2 * tCumulative(-Math.abs(welch(e).t), welch(e).df) },
	{ match: /^strd-(Michelso|Mavro|NumAcc\d)-mean$/, run: (e) => mean(data(e)) },
	{ match: /^strd-(Michelso|Mavro|NumAcc\d)-sd$/, run: (e) => standardDeviation(data(e)) },
	{ match: /^strd-Norris-B0$/, run: (e) => line(e).fit[0]! },
	{ match: /^strd-Norris-B1$/, run: (e) => line(e).fit[1]! },
	{ match: /^strd-Norris-SSE$/, run: (e) => line(e).sse },
	{ match: /^strd-Norris-residualSD$/, run: (e) => Math.sqrt(line(e).sse / (line(e).n - 2)) }
];
