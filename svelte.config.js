import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';
import { buildWorkers } from './src/worker/build.js';

const node = adapter();

/** @type {import('@sveltejs/kit').Config} */
export default {
	preprocess: vitePreprocess(),
	kit: {
		// The solver thread is a second entry, which adapter-node does not take: build it behind it.
		adapter: {
			name: 'merestone-node',
			async adapt(builder) {
				await node.adapt(builder);
				await buildWorkers('build/workers');
			}
		},
		// The hook checks every unsafe method and content type: src/lib/server/http/same-origin.ts.
		csrf: { trustedOrigins: ['*'] },
		typescript: {
			config(config) {
				config.include.push('../seed/**/*.ts', '../*.config.ts');
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
