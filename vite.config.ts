import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	test: {
		// Three suites by what they need: nothing, the services, the services and the built server.
		projects: [
			{
				extends: true,
				test: {
					name: 'unit',
					environment: 'node',
					include: ['src/**/*.test.ts', 'tests/reference/**/*.test.ts', 'tests/traces/**/*.test.ts']
				}
			},
			{
				extends: true,
				test: {
					name: 'integration',
					environment: 'node',
					include: ['tests/integration/**/*.test.ts', 'tests/fault/**/*.test.ts'],
					testTimeout: 60_000,
					hookTimeout: 120_000
				}
			},
			{
				extends: true,
				test: {
					name: 'browser',
					environment: 'node',
					include: ['tests/browser/**/*.test.ts'],
					// Each file has a server and a browser of its own; two of them keep two cores busy.
					maxWorkers: 2,
					testTimeout: 120_000,
					hookTimeout: 180_000
				}
			},
			{
				// Prints ratios; run by `npm run bench` only.
				extends: true,
				test: {
					name: 'bench',
					environment: 'node',
					include: ['tests/bench/**/*.test.ts'],
					fileParallelism: false,
					testTimeout: 1_800_000,
					hookTimeout: 300_000
				}
			}
		]
	}
});
