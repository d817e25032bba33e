import { describe, expect, it } from 'vitest';
import { toApiError } from './problem';

describe('an answer that failed', () => {
	it('speaks the sentence of its problem document and names the fields', () => {
		const body = JSON.stringify({
			title: 'Bad request',
			detail: 'to: must come after from.',
			status: 400,
			errors: { to: 'must come after from.' }
		});
		const error = toApiError(400, body, 'abc-1');
		expect(error.message).toBe('to: must come after from.');
		expect(error.fields).toEqual([{ field: 'to', message: 'must come after from.' }]);
		expect([error.status, error.requestId, error.mayRetry]).toEqual([400, 'abc-1', false]);
	});
	it('has a sentence of its own where a proxy answered with a page', () => {
		const error = toApiError(503, '<html>busy</html>', null);
		expect(error.message).toContain('Try again');
		expect(error.mayRetry).toBe(true);
	});
	it('names a status that nobody foresaw', () => expect(toApiError(418, '', null).message).toContain('418'));
	it('says that nothing was changed when the server was not reached', () =>
		expect(toApiError(0, '', null).message).toContain('Nothing was changed'));
});
