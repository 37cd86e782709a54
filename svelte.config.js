import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';
import { readFileSync, writeFileSync } from 'node:fs';
import { buildWorkers } from './src/worker/build.js';

const node = adapter();

/** Bytes; UPLOAD_LIMIT of src/lib/server/http/body-limit.ts, which lets only uploads use it. */
const BODY_SIZE_LIMIT = 54_000_000;

/**
 * adapter-node reads the limit from the environment while its modules are evaluated, before any code
 * of ours: a first import sets it, unless the operator did.
 */
function setBodySizeLimit() {
	writeFileSync(
		'build/body-size-limit.js',
		`process.env.BODY_SIZE_LIMIT ??= '${BODY_SIZE_LIMIT}';\n`
	);
	const index = readFileSync('build/index.js', 'utf8');
	writeFileSync('build/index.js', `import './body-size-limit.js';\n${index}`);
}

/** @type {import('@sveltejs/kit').Config} */
export default {
	preprocess: vitePreprocess(),
	kit: {
		// The solver thread is a second entry, which adapter-node does not take: build it behind it.
		adapter: {
			name: 'merestone-node',
			async adapt(builder) {
				await node.adapt(builder);
				setBodySizeLimit();
				await buildWorkers('build/workers');
			}
		},
		// The hook checks every unsafe method and content type: src/lib/server/http/same-origin.ts.
		csrf: { trustedOrigins: ['*'] },
		typescript: {
			config(config) {
				config.include.push('../seed/**/*.ts', '../*.config.ts');
				// AssemblyScript: looks like TypeScript, has other types.
				config.exclude.push('../src/lib/nonlocality/linalg/kernels/assembly/**');
			}
		},
		csp: {
			mode: 'nonce',
			directives: {
				'default-src': ['self'],
				'script-src': ['self'],
				'style-src': ['self'],
				'style-src-attr': ['unsafe-inline'],
				'img-src': ['self', 'data:'],
				'font-src': ['self'],
				'connect-src': ['self'],
				'object-src': ['none'],
				'base-uri': ['none'],
				'frame-ancestors': ['none'],
				'form-action': ['self']
			}
		}
	}
};
