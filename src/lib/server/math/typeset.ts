import katex from 'katex';
import { Recent } from '../recent';

/** Beyond these KaTeX takes seconds or runs out of stack (measured: 100,000 characters, 10.8 s). */
const LONGEST_FORMULA = 2_000;

const cache = new Recent<string | null>(1_000);

/**
 * Typesets LaTeX as HTML with MathML inside, safe to put into a page: KaTeX escapes all text and
 * `trust` keeps out every command that makes links, images or attributes. Null when the formula
 * is too long or can't be set; the caller then shows the plain text.
 */
export function typeset(latex: string, display = false): string | null {
	if (latex.length > LONGEST_FORMULA) return null;
	const key = `${display ? 'd' : 'i'}${latex}`;
	const known = cache.get(key);
	if (known !== undefined) return known;
	return cache.keep(key, render(latex, display));
}

function render(latex: string, displayMode: boolean): string | null {
	try {
		return katex.renderToString(latex, {
			displayMode,
			output: 'htmlAndMathml',
			trust: false,
			throwOnError: true,
			strict: 'ignore',
			maxSize: 20,
			maxExpand: 200
		});
	} catch {
		// Deep nesting throws RangeError whatever the options say.
		return null;
	}
}
