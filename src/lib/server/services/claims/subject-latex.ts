import { printExpression } from '../../../nonlocality/scenario/expression-print';
import type { Functional } from '../../../nonlocality/scenario/functional';
import { printLatex } from '../../../nonlocality/scenario/latex';

/** Longer formulas are no help to a reader, and typesetting them takes long. */
const LONGEST_LATEX = 1_500;
const LONGEST_TEXT = 300;

/** The formula in LaTeX with the indices counted as they were entered; null when it is too long. */
export function latexOf(functional: Functional, indexBase: 0 | 1): string | null {
	const latex = printLatex(functional, { indexBase });
	return latex.length <= LONGEST_LATEX ? latex : null;
}

/** The formula in plain text, cut where it gets too long for a line. */
export function textOf(functional: Functional): string {
	const text = printExpression(functional);
	return text.length <= LONGEST_TEXT ? text : `${text.slice(0, LONGEST_TEXT)} …`;
}
