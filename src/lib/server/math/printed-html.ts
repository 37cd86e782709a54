import { typeset } from './typeset';

/** LaTeX: a command, a group, a power or an index. Plain digits stay in the figures' face. */
const LATEX = /[\\{}^_$]/;

/** A value as printed, typeset where it is written in LaTeX; null: its text is the figure. */
export function printedHtml(printed: string): string | null {
	if (!LATEX.test(printed)) return null;
	const inner = printed.trim().replace(/^\$+|\$+$/g, '');
	return typeset(inner);
}
