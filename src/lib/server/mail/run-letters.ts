import { formatCount, formatDuration, formatSpan } from '$lib/domain/display/format';
import type { Flag } from '$lib/domain/model';
import type { Trx } from '../db';
import type { Deps } from '../deps';
import type { JobData } from '../jobs';
import { entitled, type Outgoing } from './outgoing';
import { oneLine } from './text';

const SPANS_SAID = 6;
const FLAGS_SAID = 20;

/** Flags that hold now: a person's, and those of reductions that no later one has replaced. */
async function flagsOf(trx: Trx, runId: string) {
	return trx
		.selectFrom('flag as f')
		.leftJoin('reduction as r', 'r.id', 'f.reductionId')
		.select(['f.rule', 'f.severity', 'f.message', 'f.spans', 'f.worst', 'f.totalS'])
		.where('f.runId', '=', runId)
		.where((eb) => eb.or([eb('f.reductionId', 'is', null), eb('r.supersededAt', 'is', null)]))
		.orderBy('f.createdAt')
		.orderBy('f.id')
		.execute();
}

const plain = (value: number) => String(Number(value.toPrecision(5)));

function flagText(flag: Awaited<ReturnType<typeof flagsOf>>[number]): string {
	const spans = flag.spans as unknown as Flag['spans'];
	const worst = flag.worst as unknown as Flag['worst'] | null;
	const lines = [`${oneLine(flag.rule)} (${flag.severity}): ${oneLine(flag.message, 600)}`];
	if (worst) {
		const at = worst.at === null ? '' : ` at ${plain(worst.at)} s`;
		lines.push(`  Worst ${plain(worst.value)} against ${plain(worst.limit)}${at}.`);
	}
	if (spans.length) {
		const said = spans.slice(0, SPANS_SAID).map(([from, to]) => formatSpan(from, to));
		const more = spans.length > SPANS_SAID ? `; and ${spans.length - SPANS_SAID} more` : '';
		const total = flag.totalS ? `, ${formatDuration(flag.totalS)} in all` : '';
		lines.push(`  ${formatCount(spans.length, 'span')}: ${said.join('; ')}${more}${total}.`);
	}
	return lines.join('\n');
}

/** To those who follow the build and to the one who logged the run, each once. */
export async function runLetters(trx: Trx, deps: Deps, event: JobData<'mail.notify'>): Promise<Outgoing[]> {
	const run = await trx
		.selectFrom('run as r')
		.innerJoin('build as b', 'b.id', 'r.buildId')
		.innerJoin('cell as c', 'c.id', 'r.cellId')
		.select(['r.id', 'r.clientId', 'r.number', 'r.buildId', 'r.loggedBy', 'r.kind', 'r.state'])
		.select(['b.number as build', 'b.title as buildTitle', 'c.code as cell'])
		.where('r.id', '=', event.subjectId)
		.executeTakeFirst();
	if (!run || run.state === 'voided') return [];
	const flags = await flagsOf(trx, run.id);
	if (!flags.length) return [];
	const followers = await trx
		.selectFrom('follow')
		.select('personId')
		.where('buildId', '=', run.buildId)
		.execute();
	const people = await entitled(trx, [...followers.map((row) => row.personId), run.loggedBy], run.clientId);
	const count = formatCount(flags.length, 'flag');
	const letter = {
		subject: `Flagged: run ${run.number}, ${count}`,
		opening: `Run ${run.number} of build ${run.build} has ${count} to look at.`,
		facts: [
			['Run', run.number],
			['Build', `${run.build}, ${run.buildTitle}`],
			['Cell', run.cell],
			['Test', run.kind.replaceAll('_', ' ')]
		] as [string, string][],
		paragraphs: [
			...flags.slice(0, FLAGS_SAID).map(flagText),
			...(flags.length > FLAGS_SAID ? [`And ${flags.length - FLAGS_SAID} more on the run’s page.`] : [])
		],
		link: `${deps.config.origin}/runs/${encodeURIComponent(run.number)}`
	};
	return people.map((recipientId) => ({ recipientId, letter }));
}
