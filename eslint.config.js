import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import path from 'node:path';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

/**
 * The layer and, within `server`, the subject that a file below `src` belongs to.
 * @param {string} file
 * @returns {{ layer: string, subject?: string, rest?: string }}
 */
function placeOf(file) {
	const at = file.replaceAll('\\', '/').split('/src/').pop() ?? '';
	const server = /^lib\/server\/([^/]+)\/(.*)$/.exec(at);
	if (server) return { layer: 'server', subject: server[1], rest: server[2] };
	const lib = /^lib\/(domain|components|client)\//.exec(at);
	if (lib?.[1]) return { layer: lib[1] };
	return { layer: at.startsWith('routes/') ? 'routes' : at.startsWith('local/') ? 'local' : 'entry' };
}

/**
 * What each layer may import; DEVELOPERS.md says why.
 * @type {Record<string, string[]>}
 */
const MAY_IMPORT = {
	domain: ['domain'],
	client: ['client', 'domain'],
	components: ['components', 'client', 'domain'],
	server: ['server', 'domain'],
	routes: ['routes', 'server', 'domain', 'components', 'client'],
	local: ['local'],
	entry: ['server', 'domain', 'entry', 'components', 'client']
};

/** @type {import('eslint').Rule.RuleModule} */
const oneWayImports = {
	meta: { type: 'problem', schema: [] },
	create(context) {
		const from = placeOf(context.filename);
		if (!context.filename.includes('/src/')) return {};
		const check = (
			/** @type {import('eslint').Rule.Node & { source?: { value?: unknown } | null }} */ node
		) => {
			const name = node.source?.value;
			if (typeof name !== 'string') return;
			if (from.layer === 'server' && /^\$(app|env)\//.test(name))
				context.report({
					node,
					message: 'Server code runs outside Vite too (worker, admin): no $app or $env here.'
				});
			const target = name.startsWith('$lib/')
				? '/src/lib/' + name.slice(5)
				: name.startsWith('.')
					? path.resolve(path.dirname(context.filename), name)
					: null;
			if (!target || !target.includes('/src/')) return;
			const to = placeOf(target.replace(/\.(ts|js)$/, '') + '/');
			if (target.endsWith('.css') || target.endsWith('.svelte.js')) return;
			if (!MAY_IMPORT[from.layer]?.includes(to.layer))
				context.report({ node, message: `${from.layer} may not import ${to.layer} (${name}).` });
			const inside = target.split('/lib/server/')[1];
			if (to.layer === 'server' && inside && inside.split('/').length > 1) {
				const [subject, ...rest] = inside.split('/');
				const file = rest.join('/').replace(/\.(ts|js)$/, '');
				if (subject !== from.subject && file !== 'index')
					context.report({ node, message: `Use ${subject} through its index.ts (${name}).` });
			}
		};
		return { ImportDeclaration: check, ExportNamedDeclaration: check, ExportAllDeclaration: check };
	}
};

export default ts.config(
	{ ignores: ['build/', '.svelte-kit/', '.local/', '.test/', 'node_modules/', 'src/lib/server/db/types.ts'] },
	js.configs.recommended,
	...ts.configs.recommended,
	...svelte.configs['flat/recommended'],
	prettier,
	...svelte.configs['flat/prettier'],
	{
		languageOptions: {
			globals: Object.fromEntries(
				[
					'process',
					'console',
					'Buffer',
					'URL',
					'URLSearchParams',
					'setTimeout',
					'clearTimeout',
					'setInterval',
					'clearInterval',
					'setImmediate',
					'fetch',
					'Request',
					'Response',
					'Headers',
					'AbortController',
					'AbortSignal',
					'TextDecoder',
					'TextEncoder',
					'crypto',
					'performance',
					'window',
					'document',
					'navigator',
					'localStorage',
					'location',
					'HTMLElement',
					'ResizeObserver',
					'MutationObserver',
					'requestAnimationFrame',
					'cancelAnimationFrame',
					'XMLHttpRequest',
					'FormData',
					'File',
					'Blob',
					'matchMedia',
					'ReadableStream',
					'structuredClone',
					'getComputedStyle',
					'history'
				].map((name) => [name, 'readonly'])
			)
		}
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts'],
		languageOptions: { parserOptions: { parser: ts.parser, svelteConfig, extraFileExtensions: ['.svelte'] } }
	},
	{
		files: ['src/**/*.ts', 'tests/**/*.ts', 'migrations/**/*.ts'],
		languageOptions: { parserOptions: { projectService: true } },
		rules: {
			'@typescript-eslint/no-floating-promises': 'error',
			'@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { arguments: false } }],
			'@typescript-eslint/switch-exhaustiveness-check': [
				'error',
				{ considerDefaultExhaustiveForUnions: true }
			]
		}
	},
	{
		plugins: { house: { rules: { 'one-way-imports': oneWayImports } } },
		rules: {
			'house/one-way-imports': 'error',
			eqeqeq: ['error', 'always', { null: 'ignore' }],
			// Vitest's hooks insist on a destructured first argument.
			'no-empty-pattern': ['error', { allowObjectPatternsAsParameters: true }],
			'max-lines': ['error', { max: 400, skipBlankLines: true }],
			'no-undef': 'off',
			'@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
			'@typescript-eslint/no-explicit-any': 'error',
			'svelte/no-navigation-without-resolve': 'off'
		}
	},
	{
		files: ['migrations/**/*.ts'],
		rules: { '@typescript-eslint/no-explicit-any': 'off', 'max-lines': 'off' }
	}
);
