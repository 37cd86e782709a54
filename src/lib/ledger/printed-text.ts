/** What was typed, brought to plain ASCII, with the place each character came from. */
export interface PrintedText {
	readonly text: string;
	/** `at[i]`: zero-based position in what was typed of the character `text[i]`. */
	readonly at: readonly number[];
}

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** `⁻⁴` becomes `^(-4)`. */
function lowerSuperscript(run: string): string {
	const lowered = [...run].map((c) => {
		if (c === '⁻') return '-';
		if (c === '⁺') return '';
		return String(SUPERSCRIPTS.indexOf(c));
	});
	return `^(${lowered.join('')})`;
}

/** Tried in this order at every place; `≈` stands for "about", `<` and `>` for the inequalities. */
const RULES: readonly (readonly [RegExp, string | ((found: string) => string)])[] = [
	[/[\s\u00a0\u2007\u2009\u200a\u202f\u2060$]+/y, ' '],
	[
		/\\(?:[,;:! ()[\]]|(?:q?quad|left|right|displaystyle|(?:math|text)(?:bf|rm|it)|bm|text)(?![A-Za-z]))/y,
		' '
	],
	[/\\(?:approx|simeq|sim|cong)(?![A-Za-z])|[≈≃∼≅]/y, '≈'],
	[/\\(?:leqslant|leq?|lesssim)(?![A-Za-z])|<=|=<|[≤⩽≲]/y, '<'],
	[/\\(?:geqslant|geq?|gtrsim)(?![A-Za-z])|>=|=>|[≥⩾≳]/y, '>'],
	[/\\pm(?![A-Za-z])|±|\+\s*\/?\s*[-\u2212]/y, '±'],
	[/\\(?:times|cdot)(?![A-Za-z])|[×·⋅∙]/y, '*'],
	[/\\(?:dots|ldots|cdots)(?![A-Za-z])|\.\.\.|…/y, '…'],
	[/\\%|％/y, '%'],
	[/[\u2212\u2010-\u2013\ufe63\uff0d]/y, '-'],
	[/[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+/y, lowerSuperscript],
	[/\\infty(?![A-Za-z])|∞/y, 'infinity']
];

/** Brings minus signs, spaces, LaTeX commands and superscripts to plain text. */
export function plainText(typed: string): PrintedText {
	let text = '';
	const at: number[] = [];
	let place = 0;
	const put = (piece: string) => {
		text += piece;
		for (let i = 0; i < piece.length; i++) at.push(place);
	};
	while (place < typed.length) {
		const match = matchRule(typed, place);
		if (match) {
			put(match.piece);
			place += match.length;
		} else {
			put(typed.charAt(place));
			place += 1;
		}
	}
	return { text, at };
}

function matchRule(typed: string, place: number): { piece: string; length: number } | null {
	for (const [pattern, piece] of RULES) {
		pattern.lastIndex = place;
		const found = pattern.exec(typed)?.[0];
		if (found)
			return { piece: typeof piece === 'string' ? piece : piece(found), length: found.length };
	}
	return null;
}

/** The part from `start` on, up to `end`. */
export function sliceText(printed: PrintedText, start: number, end?: number): PrintedText {
	return { text: printed.text.slice(start, end), at: printed.at.slice(start, end) };
}

/** Without the characters a pattern (one character wide) matches. */
export function withoutCharacters(printed: PrintedText, drop: RegExp): PrintedText {
	const kept = [...printed.at.keys()].filter((i) => !drop.test(printed.text.charAt(i)));
	return {
		text: kept.map((i) => printed.text.charAt(i)).join(''),
		at: kept.map((i) => printed.at[i] ?? 0)
	};
}
