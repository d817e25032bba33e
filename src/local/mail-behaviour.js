/**
 * How the mail catcher misbehaves on purpose, so that tests can show that no mail is lost: rules by recipient, tried in
 * order, the first that matches holds.
 *
 * - `refuse`: answers RCPT TO with `code` (421 also closes, 451 later, 550 never)
 * - `delay`: takes `delayMs` before the answer to the data
 * - `close_after_data`: keeps the mail, then breaks the connection instead of answering
 *
 * @typedef {{ recipient: string, action: 'refuse' | 'delay' | 'close_after_data', code: number, delayMs: number,
 *   times: number }} Rule `recipient` is a regular expression; `times` is how often the rule still holds
 */

/**
 * @param {unknown} given
 * @returns {Rule[] | string} the rules, or what is wrong with them
 */
export function parseRules(given) {
	if (!Array.isArray(given)) return 'Send a JSON array of rules.';
	/** @type {Rule[]} */
	const rules = [];
	for (const one of given) {
		if (typeof one !== 'object' || one === null) return 'A rule is an object.';
		const { recipient, action, code = 451, delayMs = 0, times = Number.MAX_SAFE_INTEGER } = one;
		if (typeof recipient !== 'string') return 'recipient must be a regular expression as text.';
		try {
			new RegExp(recipient);
		} catch {
			return `recipient is no regular expression: ${recipient}`;
		}
		if (!['refuse', 'delay', 'close_after_data'].includes(action))
			return 'action must be refuse, delay or close_after_data.';
		if (!Number.isInteger(code) || code < 400 || code > 599) return 'code must be from 400 to 599.';
		if (![delayMs, times].every((value) => Number.isInteger(value) && value >= 0))
			return 'delayMs and times must be whole numbers from 0.';
		rules.push({ recipient, action, code, delayMs, times });
	}
	return rules;
}

/**
 * The rule of this action that holds for a recipient; uses up one of its times.
 * @param {Rule[]} rules
 * @param {Rule['action'][]} actions
 * @param {string[]} recipients
 */
export function takeRule(rules, actions, recipients) {
	const rule = rules.find(
		(one) =>
			actions.includes(one.action) &&
			one.times > 0 &&
			recipients.some((recipient) => new RegExp(one.recipient).test(recipient))
	);
	if (rule) rule.times--;
	return rule ?? null;
}
