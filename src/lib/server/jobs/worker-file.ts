import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/**
 * Finds a bundled thread entry: beside the production build (build/workers), in .svelte-kit/workers
 * while developing, or in MERESTONE_WORKERS. Bundling moves this module, so it walks up from where
 * it stands.
 */
export function findWorkerFile(name: string): string | null {
	const file = `${name}.js`;
	const given = process.env.MERESTONE_WORKERS;
	if (given) return existsSync(join(given, file)) ? join(given, file) : null;
	let folder = dirname(fileURLToPath(import.meta.url));
	for (;;) {
		for (const place of ['workers', '.svelte-kit/workers', 'build/workers']) {
			const candidate = join(folder, place, file);
			if (existsSync(candidate)) return candidate;
		}
		const parent = dirname(folder);
		if (parent === folder) return null;
		folder = parent;
	}
}
