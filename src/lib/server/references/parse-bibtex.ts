import type { Cite as CiteClass } from '@citation-js/core';
import { normaliseArxiv, normaliseDoi } from './identifiers';
import { plainMath } from './plain-math';
import { formattedName, shortLabel, sourceLine, yearOf, type CslEntry } from './labels';

export const BIBTEX_LIMITS = { characters: 20_000, depth: 30 } as const;

export interface ParsedReference {
	readonly csl: CslEntry;
	readonly title: string;
	readonly short: string;
	readonly source: string;
	/** The whole reference on one line, APA as Citation.js words it. */
	readonly formatted: string;
	readonly year: number | null;
	readonly doi: string | null;
	readonly arxiv: string | null;
}

export type BibtexReading =
	| { readonly ok: true; readonly reference: ParsedReference }
	| {
			readonly ok: false;
			readonly message: string;
			/** Zero-based place in the text, where it is known. */
			readonly position: number | null;
	  };

const wrong = (message: string, position: number | null = null): BibtexReading => ({
	ok: false,
	message,
	position
});

/**
 * Reads one BibTeX entry with Citation.js. Its engine takes 0.8 to 6 s to start, so it is loaded
 * on first use, in a thread (see thread.ts).
 */
export async function parseBibtex(text: string): Promise<BibtexReading> {
	if (!text.trim()) return wrong('Paste the BibTeX entry of the paper.');
	if (text.length > BIBTEX_LIMITS.characters) {
		return wrong(`At most ${BIBTEX_LIMITS.characters.toLocaleString('en')} characters of BibTeX.`);
	}
	const starts = [...text.matchAll(/@\s*([a-zA-Z]+)\s*[{(]/g)].filter(
		(match) => !/^(string|preamble|comment)$/i.test(match[1] ?? '')
	);
	const [first, second] = starts;
	// A brace that the second entry leaves open is no news while it is being typed or cut away.
	const braces = checkBraces(text.slice(0, second?.index));
	if (braces) return braces;
	if (!first) return wrong('This is no BibTeX: an entry starts like @article{key, ...}.', 0);
	if (second) {
		return wrong(
			`Line ${lineAt(text, second.index)}: a second entry starts here; paste one entry only.`,
			second.index
		);
	}
	let entry: CslEntry | undefined;
	let formatted: string;
	try {
		const Cite = await loadCitation();
		const parsed = new Cite(withKnownCommands(text), { forceType: '@bibtex/text' });
		// A key from outside would reach formatted HTML unescaped.
		parsed.data = parsed.data.map((data, index) => ({ ...data, id: `entry-${index + 1}` }));
		entry = parsed.data[0];
		if (!entry || parsed.data.length !== 1) {
			return wrong(`Line ${lineAt(text, first.index)}: this entry could not be read.`, first.index);
		}
		// A DOI pasted as an address would have the resolver's put in front of it again.
		const doi = typeof entry.DOI === 'string' ? normaliseDoi(entry.DOI) : null;
		if (doi) entry.DOI = doi;
		formatted = parsed
			.format('bibliography', { format: 'text', template: 'apa', lang: 'en-US' })
			.replace(/\s+/g, ' ')
			.trim();
	} catch (error) {
		return describeError(text, error);
	}
	return finish(text, entry, formatted);
}

function finish(text: string, entry: CslEntry, formatted: string): BibtexReading {
	const title = typeof entry.title === 'string' ? withoutTags(entry.title).trim() : '';
	if (!title) return wrong('The entry has no title.');
	if (formattedName(entry) === null) return wrong('The entry has no author or editor.');
	const givenDoi = typeof entry.DOI === 'string' ? entry.DOI : '';
	const doi = givenDoi ? normaliseDoi(givenDoi) : null;
	if (givenDoi && !doi) {
		const at = text.indexOf(givenDoi);
		return wrong(`“${givenDoi.slice(0, 80)}” is not a DOI.`, at >= 0 ? at : null);
	}
	// How Citation.js came by it is no part of the entry.
	const csl = Object.fromEntries(Object.entries(entry).filter(([key]) => key !== '_graph'));
	return {
		ok: true,
		reference: {
			csl: { ...csl, ...(doi ? { DOI: doi } : {}) },
			title,
			short: shortLabel(entry),
			source: sourceLine(entry),
			formatted,
			year: yearOf(entry),
			doi,
			arxiv: arxivOf(text)
		}
	};
}

/** Citation.js drops `eprint`, so it is read from what was pasted. */
function arxivOf(text: string): string | null {
	const eprint = /\beprint\s*=\s*["{]\s*([^"{}]+?)\s*["}]/i.exec(text)?.[1];
	return eprint ? normaliseArxiv(eprint) : null;
}

let loading: Promise<typeof CiteClass> | undefined;

async function loadCitation(): Promise<typeof CiteClass> {
	loading ??= (async () => {
		const { Cite } = await import('@citation-js/core');
		await import('@citation-js/plugin-bibtex');
		await import('@citation-js/plugin-csl');
		return Cite;
	})();
	return loading;
}

/** Commands that plugin-bibtex 0.8.2 leaves as text or turns into a dotless i with an accent. */
function withKnownCommands(text: string): string {
	return text
		.replace(/\\AA(?![a-zA-Z])\s*(\{\})?/g, 'Å')
		.replace(/\\aa(?![a-zA-Z])\s*(\{\})?/g, 'å')
		.replace(/\\(['"`^~])\s*(?:\{\s*\\i\s*\}|\\i(?![a-zA-Z]))/g, '\\$1{i}')
		.replace(/\\(La)?TeX(?![a-zA-Z])\s*(\{\})?/g, '$1TeX')
		.replace(/\\,/g, ' ')
		.replace(/\$([^$]{1,200})\$/g, (_, formula: string) => `$${plainMath(formula)}$`);
}

/** Citation.js marks emphasis in a title with HTML tags; titles are shown as plain text. */
const withoutTags = (text: string) =>
	text
		.replace(/<sup>/g, '^')
		.replace(/<sub>/g, '_')
		.replace(/<\/?(i|b|sup|sub|sc|span)( [^<>]*)?>/g, '');

const FIELD_START = /^[ \t]*[a-z]+[ \t]*=/i;

/**
 * Which brace was forgotten can't be known for sure. Fields usually start on lines of their own
 * directly inside the entry, so the likely one is a deeper brace still open where a field starts.
 */
function checkBraces(text: string): BibtexReading | null {
	const open: number[] = [];
	let suspect: number | undefined;
	for (let i = 0; i < text.length; i++) {
		const startsLine = i === 0 || text[i - 1] === '\n';
		if (startsLine && open.length > 1 && FIELD_START.test(text.slice(i, i + 40))) {
			suspect ??= open[1];
		}
		const escaped = text[i - 1] === '\\';
		if (text[i] === '{' && !escaped) {
			open.push(i);
			if (open.length > BIBTEX_LIMITS.depth) {
				return wrong(`Line ${lineAt(text, i)}: braces nested too deeply.`, i);
			}
		} else if (text[i] === '}' && !escaped && open.pop() === undefined) {
			return wrong(`Line ${lineAt(text, i)}: this closing brace has no opening one.`, i);
		}
	}
	if (open.length === 0) return null;
	const unclosed = suspect ?? open.at(-1) ?? 0;
	return wrong(`Line ${lineAt(text, unclosed)}: this brace is never closed.`, unclosed);
}

export function lineAt(text: string, position: number): number {
	return text.slice(0, position).split('\n').length;
}

function describeError(text: string, error: unknown): BibtexReading {
	const message = error instanceof Error ? error.message : '';
	const place = /line (\d+) col (\d+)/.exec(message);
	if (!place) return wrong('This BibTeX could not be read.');
	const line = Number(place[1]);
	const before = text.split('\n').slice(0, line - 1);
	const position = before.reduce((sum, part) => sum + part.length + 1, 0) + Number(place[2]) - 1;
	const expected = /expected "(\w+)", got "?(\w+)"?/.exec(message);
	const what = expected ? `: expected ${WORDS[expected[1] ?? ''] ?? 'something else'}` : '';
	return wrong(`Line ${line} can't be read${what}.`, Math.min(position, text.length));
}

const WORDS: Readonly<Record<string, string>> = {
	comma: 'a comma',
	rbrace: 'a closing brace',
	lbrace: 'an opening brace',
	equals: 'an equals sign',
	label: 'a key',
	text: 'a value',
	quote: 'a quotation mark'
};
