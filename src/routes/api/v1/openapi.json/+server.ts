import { json } from '@sveltejs/kit';
import { openApiDocument, operationsOf } from '$lib/server/api';
import { VERSION } from '$lib/server/health';

const modules = import.meta.glob<Record<string, unknown>>('../**/+server.ts');

/** Made at the first call: loading every route module while they are still loading each other would be circular. */
let document: object | undefined;

export async function GET() {
	if (!document) {
		const loaded = Object.entries(modules).map(
			async ([file, load]) => [file.replace('../', '/api/v1/'), await load()] as const
		);
		document = openApiDocument(operationsOf(Object.fromEntries(await Promise.all(loaded))), VERSION);
	}
	return json(document, { headers: { 'cache-control': 'public, max-age=60' } });
}
