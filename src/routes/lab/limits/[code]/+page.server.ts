import { ruleChanges } from '$lib/domain/limits/rule-changes';
import { getLimitSet, listLimitSetVersions } from '$lib/server/limits';
import { pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'lab.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const { id, code, title, client, version } = await getLimitSet(deps, who, params.code);
		const versions = await listLimitSetVersions(deps, who, id);
		const now = deps.now();
		const inForce = versions.find(
			({ inForce: when }) => when && (!when.from || when.from <= now) && (!when.to || now < when.to)
		);
		return {
			set: { id, code, title, client, newest: version },
			inForce: inForce?.version ?? 1,
			versions: versions.map((each) => {
				const before = versions.find((other) => other.version === each.version - 1);
				return { ...each, changes: before ? ruleChanges(before.rules, each.rules) : null };
			})
		};
	});
};
