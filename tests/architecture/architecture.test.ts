import { describe, expect, it } from 'vitest';
import { IMPORT_RULES, type ImportRule } from './import-rules';
import { allFiles, fileOf, sources, under, type Import, type SourceFile } from './source-files';

const within = (target: string, starts: readonly string[] = []) =>
	starts.some((start) => target === start || target.startsWith(`${start}/`));

function breaks({ may, types, packages, mustNot }: ImportRule, found: Import): boolean {
	if (mustNot?.some((start) => found.target.startsWith(start))) return true;
	if (found.isPackage) return packages !== undefined && !within(found.target, packages);
	if (found.typeOnly && within(found.target, types)) return false;
	return may !== undefined && !within(found.target, may);
}

describe('imports', () => {
	it.each(IMPORT_RULES)('of $folder stay where they belong', (rule) => {
		const files = under(rule.folder);
		expect(files.length).toBeGreaterThan(0);
		const broken = files.flatMap(({ path, imports }) =>
			imports.filter((found) => breaks(rule, found)).map(({ target }) => `${path} -> ${target}`)
		);
		expect(broken).toEqual([]);
	});

	it('that break a rule are noticed', () => {
		const of = (folder: string, target: string, isPackage = false, typeOnly = false) => {
			const rule = IMPORT_RULES.find((candidate) => candidate.folder === folder);
			return rule && breaks(rule, { target, isPackage, typeOnly });
		};
		expect(of('src/lib/nonlocality', 'zod', true)).toBe(true);
		expect(of('src/lib/nonlocality', 'src/lib/ledger/verdict')).toBe(true);
		expect(of('src/lib/ledger', 'src/lib/nonlocality/quantities/solve')).toBe(true);
		expect(of('src/lib/ledger', 'src/lib/nonlocality/problem', false, true)).toBe(false);
		expect(of('src/lib/features', 'src/lib/nonlocality/index')).toBe(true);
		expect(of('src/lib/server/services', '@sveltejs/kit', true)).toBe(true);
		expect(of('src/routes', 'src/lib/server/db/client')).toBe(true);
		expect(of('src/routes', 'src/lib/server/services/claims/show-claim')).toBe(false);
	});

	it('of what runs in a browser never reach the server', () => {
		const browser = sources.filter(
			({ path }) => path.endsWith('.svelte') || /\/\+(page|layout)\.ts$/.test(path)
		);
		const broken = browser.flatMap(({ path, imports }) =>
			imports
				.filter(({ target, typeOnly }) => target.startsWith('src/lib/server') && !typeOnly)
				.map(({ target }) => `${path} -> ${target}`)
		);
		expect(broken).toEqual([]);
	});

	it('form no cycles', () => {
		const seen = new Set<SourceFile>();
		const cycles: string[] = [];
		const visit = (file: SourceFile, above: readonly SourceFile[]) => {
			const at = above.indexOf(file);
			if (at >= 0) {
				cycles.push([...above.slice(at), file].map(({ path }) => path).join(' -> '));
				return;
			}
			if (seen.has(file)) return;
			for (const { target, typeOnly } of file.imports) {
				const next = typeOnly ? undefined : fileOf(target);
				if (next) visit(next, [...above, file]);
			}
			seen.add(file);
		};
		for (const file of sources) visit(file, []);
		expect(cycles).toEqual([]);
	});
});

describe('every route guards itself', () => {
	const SHARED = 'a run belongs to no group; the service shows it to whom a claim on it is visible';
	/** Open to everyone by intent, each with its reason. */
	const OPEN: Readonly<Record<string, string>> = {
		'src/routes/+layout.server.ts': 'who is here, for the header; nothing for a visitor',
		'src/routes/(account)/sign-out/+server.ts': 'signing out twice is no error',
		'src/routes/(account)/join/[token]/+page.server.ts': 'shows whom a link lets in, to its holder',
		'src/routes/api/v1/recomputations/[id]/check/+server.ts': SHARED,
		'src/routes/api/v1/recomputations/[id]/result/+server.ts': SHARED,
		'src/routes/(public)/recomputations/[id]/+page.server.ts': SHARED,
		'src/routes/api/v1/inequalities/[id]/sdpa/+server.ts': SHARED,
		'src/routes/api/v1/recomputations/[id]/sdpa/+server.ts': SHARED
	};
	const GUARD = /\b(requireUser|requireRole|requireAdmin|publicContext)\(/;
	const doors = sources.filter(({ path }) =>
		/^src\/routes\/.*\+(page\.server|layout\.server|server)\.ts$/.test(path)
	);

	it('by a guard of its own, since a layout protects nothing', () => {
		const open = doors.filter(({ path, text }) => !GUARD.test(text) && !(path in OPEN));
		expect(open.map(({ path }) => path)).toEqual([]);
	});

	it('and the list of open ones names only files that exist', () => {
		const paths = doors.map(({ path }) => path);
		expect(Object.keys(OPEN).filter((path) => !paths.includes(path))).toEqual([]);
	});
});

describe('files', () => {
	const limit = ({ path }: SourceFile) => (path.endsWith('.svelte') ? 200 : 400);

	it('stay short enough to be read in one go', () => {
		const long = allFiles
			.filter((file) => file.lines > limit(file))
			.map(({ path, lines }) => `${path}: ${lines}`);
		expect(long).toEqual([]);
	});

	it('keep the hook and the routes thin', () => {
		const hook = sources.find(({ path }) => path === 'src/hooks.server.ts');
		expect(hook?.lines).toBeLessThanOrEqual(40);
		const doors = sources
			.filter(({ path, lines }) => /^src\/routes\/.*\bserver\.ts$/.test(path) && lines > 60)
			.map(({ path }) => path);
		expect(doors).toEqual([]);
	});

	it('have names in kebab-case, components in PascalCase, and say what they hold', () => {
		const odd = sources
			.map(({ path }) => path)
			.filter((path) => !path.startsWith('src/routes/'))
			.filter((path) => {
				const name = path.slice(path.lastIndexOf('/') + 1);
				if (/^(utils?|helpers?|common|misc)\./.test(name)) return true;
				return name.endsWith('.svelte')
					? !/^[A-Z][A-Za-z0-9]*\.svelte$/.test(name)
					: !/^[a-z0-9]+(-[a-z0-9]+)*(\.(server|client|svelte))?\.(ts|js)$/.test(name);
			});
		expect(odd).toEqual([]);
	});
});

describe('code keeps away from', () => {
	const using = (files: readonly SourceFile[], pattern: RegExp, but: readonly string[] = []) =>
		files
			.filter(({ path, text }) => pattern.test(withoutComments(text)) && !but.includes(path))
			.map(({ path }) => path);

	it('SQL that is put together from text', () => {
		expect(using(sources, /\bsql\.(raw|identifier)\b/)).toEqual([]);
	});

	it('evaluating text as a programme', () => {
		expect(using(sources, /\beval\(|new Function\(|from 'node:vm'/)).toEqual([]);
	});

	it('randomness and clocks in the numerical library', () => {
		const pattern = /\bMath\.random\b|\bDate\.now\b|new Date\(|\bperformance\.|\bconsole\./;
		expect(using(under('src/lib/nonlocality'), pattern)).toEqual([]);
		expect(using(under('src/lib/ledger'), /\bMath\.random\b|\bDate\.now\b|new Date\(/)).toEqual([]);
	});

	it('randomness that can be guessed, where secrets are made', () => {
		expect(using(under('src/lib/server'), /\bMath\.random\b/)).toEqual([]);
	});

	it('raw HTML outside the components that show what the server typeset', () => {
		const shown = [
			'src/lib/features/math/Formula.svelte', // KaTeX's output
			'src/lib/features/markdown/Markdown.svelte' // what server/markdown sanitised
		];
		expect(using(sources, /\{@html\b/, shown)).toEqual([]);
	});

	it('stock colours: every colour has a name of the design', () => {
		const pattern =
			/\b(bg|text|border|ring|fill|stroke)-(red|green|blue|gray|grey|slate|zinc|neutral|stone|amber|yellow|lime|emerald|teal|cyan|sky|indigo|violet|purple|pink|rose|orange)-\d{2,3}\b/;
		expect(
			using(
				sources.filter(({ path }) => path.endsWith('.svelte')),
				pattern
			)
		).toEqual([]);
	});
});

function withoutComments(text: string): string {
	return text.replace(/\/\*[\s\S]*?\*\//g, '').replace(/(^|\s)\/\/.*$/gm, '');
}
