const LOOPBACK = new Set(['localhost', '127.0.0.1', '[::1]']);

/**
 * Where a page is to be read instead when it was asked for by another of this machine's own names (127.0.0.1 for localhost):
 * cookies and the origin check go by name, so its forms would be refused. Only pages; programs may use any name.
 * @returns an address at the configured origin, or null when the name is right or is no loopback name
 */
export function loopbackDetour(origin: string, request: Request): string | null {
	if (request.method !== 'GET' && request.method !== 'HEAD') return null;
	if (!request.headers.get('accept')?.includes('text/html')) return null;
	const host = request.headers.get('host');
	const own = new URL(origin);
	if (!host || host === own.host || own.protocol !== 'http:' || !URL.canParse(`http://${host}`)) return null;
	const asked = new URL(`http://${host}`);
	if (asked.port !== own.port || !LOOPBACK.has(asked.hostname) || !LOOPBACK.has(own.hostname)) return null;
	const { pathname, search } = new URL(request.url);
	return own.origin + pathname + search;
}
