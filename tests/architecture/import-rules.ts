/**
 * Who may import whom; the table of DEVELOPERS.md. `may` and `packages` are the beginnings of what
 * is allowed; types may be taken from `types` too. A file obeys every rule whose folder holds it.
 */
export interface ImportRule {
	readonly folder: string;
	readonly may?: readonly string[];
	readonly types?: readonly string[];
	readonly packages?: readonly string[];
	readonly mustNot?: readonly string[];
}

const lib = (...paths: string[]) => paths.map((path) => `src/lib/${path}`);

/** What a browser can carry: no solver, no WebAssembly. */
const light = lib(
	'nonlocality/exact',
	'nonlocality/scenario',
	'nonlocality/notation',
	'nonlocality/problem'
);

export const IMPORT_RULES: readonly ImportRule[] = [
	{
		folder: 'src/lib/nonlocality',
		may: lib('nonlocality'),
		packages: ['fraction.js', 'mathjs', 'highs']
	},
	{
		folder: 'src/lib/nonlocality/certificates',
		may: lib(
			'nonlocality/exact',
			'nonlocality/scenario',
			'nonlocality/certificates',
			'nonlocality/problem'
		)
	},
	{
		folder: 'src/lib/ledger',
		may: lib('ledger', 'nonlocality/exact', 'nonlocality/scenario'),
		types: lib('nonlocality'),
		packages: ['fraction.js']
	},
	{
		folder: 'src/lib/schemas',
		may: [...lib('schemas', 'ledger'), ...light, 'node_modules/sveltekit-superforms'],
		types: lib('nonlocality'),
		packages: ['zod']
	},
	{ folder: 'src/worker', may: [...lib('nonlocality'), 'src/worker'], mustNot: ['svelte', '$'] },
	{
		folder: 'src/cli',
		may: [...lib('nonlocality', 'ledger', 'schemas'), 'src/cli'],
		mustNot: ['svelte', '@sveltejs', '$', 'drizzle-orm']
	},
	{
		folder: 'src/lib/components',
		may: lib('components'),
		mustNot: ['drizzle-orm', 'node:', '@libsql', 'zod']
	},
	{
		folder: 'src/lib/features',
		may: [...lib('features', 'components', 'schemas', 'ledger'), ...light],
		types: lib('nonlocality'),
		mustNot: ['drizzle-orm', 'node:', '@libsql']
	},
	{
		folder: 'src/lib/server',
		// The pool and the thread share the shape of a task.
		may: [...lib('server', 'schemas', 'ledger', 'nonlocality'), 'src/worker/task'],
		types: lib('features'),
		// Relative imports only, so that the seed calls the same verbs outside SvelteKit.
		mustNot: ['$app', '$env', '$lib']
	},
	{ folder: 'src/lib/server/services', mustNot: ['@sveltejs/kit', 'sveltekit-superforms'] },
	{ folder: 'src/lib/server/jobs', mustNot: ['@sveltejs/kit', 'sveltekit-superforms'] },
	{
		folder: 'src/routes',
		mustNot: ['drizzle-orm', '@libsql', 'src/lib/server/db', 'lucia']
	}
];
