import { build } from 'vite';

/**
 * Bundles the threads' entries (`solver.js`, `references.js`) to a folder; packages stay external, so that
 * HiGHS finds its WebAssembly file beside itself.
 * @param {string} outDir
 * @param {{ watch?: boolean }} [options]
 */
export async function buildWorkers(outDir, options = {}) {
	await build({
		configFile: false,
		logLevel: 'warn',
		publicDir: false,
		build: {
			ssr: true,
			outDir,
			emptyOutDir: true,
			target: 'node20',
			watch: options.watch ? {} : null,
			rolldownOptions: {
				input: {
					solver: 'src/worker/solver.ts',
					references: 'src/lib/server/references/thread.ts'
				},
				output: { entryFileNames: '[name].js', format: 'es' }
			}
		}
	});
}
