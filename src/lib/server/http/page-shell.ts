import type { ResolveOptions } from '@sveltejs/kit';
import { createInitialModeExpression } from 'mode-watcher';

/** Light or dark is set before the first paint, by a script that carries the page's nonce. */
export const pageShell: ResolveOptions = {
	transformPageChunk: ({ html }) =>
		html.replace('%modewatcher.snippet%', () => createInitialModeExpression())
};
