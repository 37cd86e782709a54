import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { fileURLToPath } from 'node:url';
import { defineConfig, type Plugin } from 'vitest/config';
import { buildWorkers } from './src/worker/build.js';

/** Keeps .svelte-kit/workers/solver.js fresh while developing. */
function developmentWorkers(): Plugin {
	return {
		name: 'development-workers',
		apply: 'serve',
		async configureServer() {
			if (!process.env.VITEST) await buildWorkers('.svelte-kit/workers', { watch: true });
		}
	};
}

export default defineConfig({
	plugins: [tailwindcss(), sveltekit(), developmentWorkers()],
	resolve: {
		alias: {
			// The package's own entry imports every schema library there is.
			'sveltekit-superforms/adapters': fileURLToPath(
				new URL('./src/lib/schemas/superforms-adapter.ts', import.meta.url)
			)
		}
	},
	build: { assetsInlineLimit: 0 },
	test: {
		expect: { requireAssertions: true },
		coverage: {
			provider: 'custom',
			customProviderModule: './tests/support/coverage-provider.mjs',
			include: ['src/lib/nonlocality/**/*.ts'],
			thresholds: { branches: 95 },
			// Compiled to WebAssembly, never run as JavaScript; its tests compare it with the plain kernels.
			exclude: ['**/*.test.ts', 'src/lib/nonlocality/linalg/kernels/assembly/**']
		},
		projects: [
			{
				extends: true,
				test: {
					name: 'unit',
					environment: 'node',
					setupFiles: ['tests/support/fast-check.ts'],
					// Solvers on a busy machine; each test takes well under a second on an idle one.
					testTimeout: 30_000,
					include: [
						'src/**/*.test.ts',
						'tests/architecture/**/*.test.ts',
						'tests/certificates/**/*.test.ts',
						'tests/bench/**/*.test.ts',
						'tests/vectors/**/*.test.ts'
					],
					exclude: ['src/lib/components/**', 'src/lib/features/**']
				}
			},
			{
				extends: true,
				resolve: { conditions: ['browser'] },
				test: {
					name: 'component',
					environment: 'jsdom',
					// Unmounts what a test rendered.
					setupFiles: ['@testing-library/svelte/vitest', 'tests/support/fast-check.ts'],
					testTimeout: 30_000,
					include: ['src/lib/components/**/*.test.ts', 'src/lib/features/**/*.test.ts']
				}
			},
			{
				extends: true,
				test: {
					name: 'api',
					environment: 'node',
					include: ['tests/api/**/*.test.ts'],
					fileParallelism: false,
					testTimeout: 60_000,
					hookTimeout: 120_000
				}
			}
		]
	}
});
