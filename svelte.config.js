import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** @type {import('@sveltejs/kit').Config} */
export default {
	preprocess: vitePreprocess(),
	compilerOptions: { runes: true },
	kit: {
		adapter: adapter(),
		typescript: {
			config: (config) => ({
				...config,
				include: [...config.include, '../migrations/**/*.ts', '../*.config.ts', '../*.config.js']
			})
		},
		// Replaced by the stricter check in hooks.server.ts: the built-in one covers form content types only, and refuses them
		// to bearer tokens too, such as curl's uploads.
		csrf: { trustedOrigins: ['*'] },
		// A nonce per response; nothing inline is ever allowed without it.
		csp: {
			mode: 'nonce',
			directives: {
				'default-src': ['self'],
				'script-src': ['self'],
				// Chart and progress geometry is set through the CSSOM, which CSP does not govern.
				'style-src': ['self'],
				// The one style attribute there is: SvelteKit's own, on the element that tells screen readers of a new page.
				'style-src-attr': ['unsafe-hashes', 'sha256-S8qMpvofolR8Mpjy4kQvEm7m1q8clzU4dfDH0AmvZjo='],
				'img-src': ['self', 'data:'],
				'font-src': ['self'],
				'connect-src': ['self'],
				'object-src': ['none'],
				'base-uri': ['none'],
				'form-action': ['self'],
				'frame-ancestors': ['none']
			}
		}
	}
};
