import type { Cookies } from '@sveltejs/kit';
import { problemOf } from '$lib/server/db';
import { listRuns, runChoices, RunQuery } from '$lib/server/runs';
import { listMetricCodes } from '$lib/server/trends';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

const ROWS = 50;
const COLUMNS = ['peak_power', 'peak_torque', 'bte_max', 'bsfc_min'];
const YEAR_S = 366 * 86_400;

export const load: PageServerLoad = async ({ locals, url, cookies }) => {
	const who = personMay(locals, 'run.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const { cursor, ...asked } = Object.fromEntries(
			[...url.searchParams].filter(([name, value]) => value !== '' && name !== 'metrics')
		);
		// Without a script each ticked column is sent by itself.
		const columns = keptColumns(url.searchParams.getAll('metrics').join(','), cookies);
		const query = { ...asked, metrics: columns.join(',') };
		const [runs, choices, metrics] = await Promise.all([
			runsOf(locals, who, query, cursor),
			runChoices(deps, who),
			listMetricCodes(deps, who)
		]);
		return { runs, asked, columns, choices, metrics };
	});
};

/** An address that asks what there is not shows no runs and says why, never an error page. */
async function runsOf(
	{ deps }: App.Locals,
	who: NonNullable<App.Locals['who']>,
	query: Record<string, string>,
	cursor: string | undefined
): Promise<Awaited<ReturnType<typeof listRuns>>> {
	const read = RunQuery.safeParse(query);
	const nothing = (notes: string[]) => ({ items: [], nextCursor: null, notes });
	if (!read.success)
		return nothing(read.error.issues.map(({ path, message }) => `${path.join('.')}: ${message}.`));
	try {
		return await listRuns(deps, who, { ...read.data, limit: ROWS, cursor });
	} catch (cause) {
		const problem = problemOf(cause);
		if (problem?.status !== 400) throw cause;
		return nothing([problem.message]);
	}
}

/** The figures chosen as columns: the address says, else what was chosen last in this browser, else the usual. */
function keptColumns(given: string, cookies: Cookies): string[] {
	const of = (text: string) => {
		const read = RunQuery.shape.metrics.safeParse(text);
		return read.success && read.data?.length ? read.data : null;
	};
	const chosen = of(given);
	if (chosen)
		cookies.set('run_columns', chosen.join(','), {
			path: '/runs',
			httpOnly: true,
			sameSite: 'lax',
			maxAge: YEAR_S
		});
	return chosen ?? of(cookies.get('run_columns') ?? '') ?? COLUMNS;
}
