import { expect, it } from 'vitest';
import { loopbackDetour } from './loopback';

const page = (host: string, accept = 'text/html,*/*', method = 'GET') =>
	new Request('http://localhost:5180/schedule?view=day', { method, headers: { host, accept } });

it.each([
	['another name of this machine', page('127.0.0.1:5180'), 'http://localhost:5180/schedule?view=day'],
	['its name in IPv6', page('[::1]:5180'), 'http://localhost:5180/schedule?view=day'],
	['the right name', page('localhost:5180'), null],
	['another port, as of a tunnel', page('127.0.0.1:8080'), null],
	['a name from outside', page('fellmoor.example:5180'), null],
	['no name at all', page('::'), null],
	['a program', page('127.0.0.1:5180', 'application/json'), null],
	['a change', page('127.0.0.1:5180', 'text/html', 'POST'), null]
])('%s', (_, request, to) => expect(loopbackDetour('http://localhost:5180', request)).toBe(to));

it('leaves a site with a name of its own alone', () => {
	expect(loopbackDetour('https://bench.fellmoor.example', page('127.0.0.1'))).toBeNull();
	expect(loopbackDetour('http://bench.fellmoor.example:5180', page('127.0.0.1:5180'))).toBeNull();
});
