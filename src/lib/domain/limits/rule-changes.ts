import type { Rule } from '../model';

type RuleChange =
	| { kind: 'changed'; before: Rule; after: Rule }
	| { kind: 'added'; after: Rule }
	| { kind: 'removed'; before: Rule };

export interface RuleChanges {
	/** Changed, then added, then removed. */
	changes: RuleChange[];
	/** How many rules are the same in both. */
	same: number;
}

const exactly = (rule: Rule) =>
	JSON.stringify([
		rule.title,
		rule.subject,
		rule.relation,
		rule.limit,
		rule.holdS,
		rule.mergeGapS ?? null,
		rule.severity
	]);

/**
 * What a version of a limit set changed against the one before: differences first. A rule is known again by its title, and a
 * retitled one by what it judges; order alone changes nothing that a run is judged by.
 */
export function ruleChanges(before: readonly Rule[], after: readonly Rule[]): RuleChanges {
	const left = [...before];
	const changes: RuleChange[] = [];
	let same = 0;
	const take = (found: (rule: Rule) => boolean): Rule | undefined => {
		const at = left.findIndex(found);
		return at < 0 ? undefined : left.splice(at, 1)[0];
	};
	const changed = after.filter((rule) => !(take((old) => exactly(old) === exactly(rule)) && ++same));
	// Titles go first over all rules, so that a retitled one does not take what belongs to another's title.
	const matched = new Map<Rule, Rule>();
	for (const known of [
		(old: Rule, rule: Rule) => old.title === rule.title,
		(old: Rule, rule: Rule) =>
			JSON.stringify([old.subject, old.relation]) === JSON.stringify([rule.subject, rule.relation])
	])
		for (const rule of changed) {
			if (matched.has(rule)) continue;
			const old = take((one) => known(one, rule));
			if (old) matched.set(rule, old);
		}
	for (const rule of changed) {
		const old = matched.get(rule);
		if (old) changes.push({ kind: 'changed', before: old, after: rule });
	}
	for (const rule of changed) if (!matched.has(rule)) changes.push({ kind: 'added', after: rule });
	for (const rule of left) changes.push({ kind: 'removed', before: rule });
	return { changes, same };
}
