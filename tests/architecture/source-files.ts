import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, normalize } from 'node:path';

export interface Import {
	/** Path from the repository's root without extension, or the package's name. */
	readonly target: string;
	readonly isPackage: boolean;
	readonly typeOnly: boolean;
}

export interface SourceFile {
	readonly path: string;
	readonly text: string;
	readonly lines: number;
	readonly imports: readonly Import[];
}

const IMPORT =
	/(?:^|\n)\s*(?:import|export)\s+(type\s)?(?:[^'";]*?\sfrom\s+)?['"]([^'"]+)['"]|\bimport\(\s*['"]([^'"]+)['"]\s*\)/g;

function read(path: string): SourceFile {
	const text = readFileSync(path, 'utf8');
	const imports = [...text.matchAll(IMPORT)].map(([, typeOnly, named, dynamic]) => {
		const specifier = (named ?? dynamic ?? '').replace(/\?.*$/, '');
		const local = specifier.startsWith('.') || specifier.startsWith('$lib');
		const target = specifier.startsWith('.')
			? normalize(join(dirname(path), specifier))
			: specifier.replace(/^\$lib/, 'src/lib');
		return {
			target: local ? target.replace(/\.(js|ts)$/, '') : specifier,
			isPackage: !local,
			typeOnly: typeOnly !== undefined
		};
	});
	return { path, text, lines: text.split('\n').length - 1, imports };
}

const isTest = (path: string) => /\.test\.ts$/.test(path);

const everything = ['src', 'seed', 'tests']
	.flatMap((folder) =>
		readdirSync(folder, { recursive: true, encoding: 'utf8' }).map((path) => join(folder, path))
	)
	.filter((path) => /\.(ts|svelte|js|mjs)$/.test(path) && !path.endsWith('.d.ts'))
	.sort()
	.map(read);

/** All code by hand: sources, tests, seed. */
export const allFiles: readonly SourceFile[] = everything;

/** What ships. */
export const sources: readonly SourceFile[] = everything.filter(
	({ path }) => path.startsWith('src/') && !isTest(path)
);

/** The files of a folder that ship. */
export function under(folder: string): readonly SourceFile[] {
	return sources.filter(({ path }) => path.startsWith(`${folder}/`));
}

/** The file an import without an extension means. */
export function fileOf(target: string): SourceFile | undefined {
	return ['', '.ts', '/index.ts', '.svelte', '.js']
		.map((end) => target + end)
		.map((path) => byPath.get(path))
		.find((file) => file !== undefined);
}

const byPath = new Map(sources.map((file) => [file.path, file]));
