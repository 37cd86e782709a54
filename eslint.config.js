import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

/** Who may not import what; the same table stands in DEVELOPERS.md and tests/architecture. */
const layer = (files, patterns) => ({
	files,
	rules: {
		'no-restricted-imports': [
			'error',
			{ patterns: patterns.map(([group, message]) => ({ group, message })) }
		]
	}
});

const outside = ['$lib', '$lib/**', '$app/**', '$env/**'];

export default ts.config(
	{
		ignores: [
			'build/',
			'.svelte-kit/',
			'node_modules/',
			'data/',
			'drizzle/',
			'coverage/',
			'src/lib/nonlocality/linalg/kernels/assembly/' // AssemblyScript, not TypeScript
		]
	},
	js.configs.recommended,
	...ts.configs.strict,
	...svelte.configs.recommended,
	prettier,
	...svelte.configs.prettier,
	{
		languageOptions: { globals: { ...globals.browser, ...globals.node } },
		rules: {
			'no-undef': 'off',
			'@typescript-eslint/no-explicit-any': 'error',
			'@typescript-eslint/no-non-null-assertion': 'error',
			'@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
			'svelte/no-at-html-tags': 'error',
			'svelte/no-navigation-without-resolve': 'off'
		}
	},
	{
		files: ['src/**/*.ts', 'seed/**/*.ts', 'tests/**/*.ts'],
		languageOptions: { parserOptions: { projectService: true } },
		rules: { '@typescript-eslint/no-floating-promises': 'error' }
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts'],
		languageOptions: {
			parserOptions: {
				projectService: true,
				extraFileExtensions: ['.svelte'],
				parser: ts.parser,
				svelteConfig
			}
		}
	},
	layer(
		['src/lib/nonlocality/**/*.ts'],
		[
			[
				[
					...outside,
					'node:*',
					'svelte',
					'drizzle-orm',
					'zod',
					'**/ledger/**',
					'**/schemas/**',
					'**/server/**'
				],
				'lib/nonlocality is pure mathematics: it imports only itself, fraction.js, mathjs and highs.'
			]
		]
	),
	layer(
		['src/lib/nonlocality/certificates/**/*.ts'],
		[
			[
				[...outside, 'node:*', '**/quantities/**', '**/optimization/**', '**/linalg/**'],
				'A certificate check shares no code with the solvers: exact/, scenario/ and problem.ts only.'
			]
		]
	),
	layer(
		['src/lib/ledger/**/*.ts'],
		[
			[
				[
					...outside,
					'node:*',
					'svelte',
					'drizzle-orm',
					'zod',
					'**/schemas/**',
					'**/server/**',
					'**/quantities/**',
					'**/optimization/**'
				],
				'lib/ledger holds pure rules: nonlocality/exact, nonlocality/scenario and types only.'
			]
		]
	),
	layer(
		['src/lib/schemas/**/*.ts'],
		[
			[
				[...outside, 'node:*', '**/server/**'],
				'lib/schemas imports ledger, nonlocality/notation and zod.'
			]
		]
	),
	layer(
		['src/worker/**/*.ts', 'src/cli/**/*.ts'],
		[[[...outside, '**/server/**', 'svelte'], 'Threads and the command line know no server.']]
	),
	layer(
		['src/lib/components/**/*.{ts,svelte}'],
		[
			[
				['$lib/features/**', '$lib/schemas/**', '$lib/server/**'],
				'components/ are generic; what knows the domain lives in features/.'
			]
		]
	),
	layer(
		['src/lib/features/**/*.{ts,svelte}'],
		[[['$lib/server/**'], 'features/ never reach the server; pages hand them data.']]
	),
	layer(
		['src/lib/server/services/**/*.ts'],
		[
			[
				['@sveltejs/kit', '$app/**'],
				'Services know no transport: throw ServiceError, a route maps it.'
			]
		]
	),
	layer(
		['src/routes/**/*.{ts,svelte}'],
		[
			[
				['drizzle-orm', 'drizzle-orm/**', '$lib/server/db/**'],
				'Routes call a service verb; only services know the database.'
			]
		]
	),
	{ files: ['**/*.js', '**/*.mjs'], ...ts.configs.disableTypeChecked }
);
