/** What a formula copied from a paper brings along, and what is left of it without. */

const alternatives = (...patterns: RegExp[]) => patterns.map(({ source }) => source).join('|');

const OPENING = alternatives(/[\s$&]/, /\\[[(]/, /\\begin\{[A-Za-z]{1,20}\*?\}/, /\\displaystyle/);
const FONT = /\\(?:math(?:cal|rm|bf|sf|bb|scr|frak)|operatorname|text|hat|widehat|boldsymbol|bm)/;
/** `_{\text{CHSH}}`, `^Q`, `_\rho`. */
const SCRIPT = /\s*[_^]\s*(?:\{(?:[^{}]|\{[^{}]{0,40}\}){0,60}\}|\\[A-Za-z]{1,20}|[A-Za-z\d])/;
const DEFINES = alternatives(/:?\s*=/, /\\(?:equiv|coloneqq|triangleq|doteq)(?![A-Za-z])/, /[≡≔]/);

/** A name, and the sign that says what it is. */
const NAMED = new RegExp(
	`^(?:${OPENING})*(?:\\\\langle\\s*)?(?:${FONT.source}\\s*){0,3}\\{?` +
		`([A-Za-z]{1,8}|\\\\[A-Za-z]{1,12})(\\d{0,6})\\}?((?:${SCRIPT.source}){0,3})` +
		`\\s*(?:\\\\rangle)?[\\s&]*(?:${DEFINES})&?`
);

/** What may stand behind a formula, apart from single characters. */
const BEHIND = new RegExp(
	`(?:${alternatives(
		/\\[)\],;:! ]/,
		/\\\\/,
		/\\(?:q?quad|nonumber|notag)/,
		/\\right\./,
		/\\(?:label|tag|cite|ref|eqref|footnote|end|hspace|vspace)\*?\{[^{}]{0,200}\}/,
		/\\(?:text|textrm|textit|mbox)\{[^{}]{2,200}\}/,
		/,?\s{0,9}\\forall(?![A-Za-z])[^<>=]{0,200}/,
		// The number of the equation; with nothing between, (2) is the uncertainty of a last digit.
		/(?<=[,.;~]\s{0,9}|\s{2}|\\q?quad\s{0,9}|\\[;, ])\(\d{1,3}[a-z]?\)/
	)})$`
);

/**
 * The formula with everything else blanked out: a name in front (`S =`), comments, and behind it
 * the end of its display, its number, words and punctuation. Its length stays, and so do positions.
 */
export function withoutSurroundings(source: string): string {
	const text = withoutName(
		source.replace(/(?<!\\)%.*$/gm, (comment) => ' '.repeat(comment.length))
	);
	let end = text.length;
	for (;;) {
		while (end > 0 && isLoose(text, end - 1)) end--;
		const found = BEHIND.exec(text.slice(Math.max(0, end - 300), end));
		if (!found) return text.slice(0, end).padEnd(source.length);
		end -= found[0].length;
	}
}

/** Spaces, and the full stop of a sentence, but no ellipsis and no backslash's own character. */
function isLoose(text: string, at: number): boolean {
	const character = text.charAt(at);
	const before = text.charAt(at - 1);
	if (before === '\\') return false;
	return /[\s$&~]/.test(character) || (/[.,;]/.test(character) && before !== '.');
}

/** `S = A0 B0 + ...`: the name goes, unless it is an observable or nothing but a number follows. */
function withoutName(text: string): string {
	const [found, letters = '', digits = '', script = ''] = NAMED.exec(text) ?? [];
	if (found === undefined) return text;
	const isObservable = /^[A-F]$/.test(letters) && /^\s*(_\s*\{?\s*)?\d*\s*\}?$/.test(script);
	if (isObservable && digits + script !== '') return text;
	const rest = text.slice(found.length);
	if (!/[A-Za-z]/.test(rest.replace(/\\[A-Za-z]+/g, ''))) return text;
	return ' '.repeat(found.length) + rest;
}
