import type { Coefficient } from '../exact/coefficient';
import { printRational, type Rational } from '../exact/rational';
import {
	isSum,
	joinPieces,
	partiesNamed,
	printableTerms,
	signedPiece,
	type PrintOptions
} from './expression-print';
import { PARTY_LETTERS } from './expression-tree';
import type { Functional } from './functional';
import type { Observable } from './observables';
import { partyCount } from './scenario';

/** `\tfrac{1}{2}`, or an integer. */
export function rationalLatex(value: Rational): string {
	if (value.d === 1n) return printRational(value);
	return `${value.s < 0n ? '-' : ''}\\tfrac{${value.n}}{${value.d}}`;
}

/** A coefficient in LaTeX: `2\sqrt{2}`, `\tfrac{1}{2}+\sqrt{3}`. */
export function coefficientLatex(value: Coefficient): string {
	let latex =
		value.rational.n === 0n && value.parts.length > 0 ? '' : rationalLatex(value.rational);
	for (const { scale, factors } of value.parts) {
		const size = scale.abs();
		const sign = scale.s < 0n ? '-' : latex === '' ? '' : '+';
		const number = size.equals(1) ? '' : rationalLatex(size);
		latex += sign + number + factors.map((factor) => textLatex(factor.text)).join('\\,');
	}
	return latex;
}

/** LaTeX of the text of a number, as coefficients print them: + - * / sqrt cos sin pi, parentheses. */
function textLatex(text: string): string {
	const root = 'sqrt(';
	const at = text.indexOf(root);
	if (at >= 0) {
		const start = at + root.length;
		let open = 1;
		let end = start;
		for (; end < text.length && open > 0; end++) {
			if (text[end] === '(') open++;
			if (text[end] === ')') open--;
		}
		const inside = textLatex(text.slice(start, end - 1));
		return `${plainLatex(text.slice(0, at))}\\sqrt{${inside}}${textLatex(text.slice(end))}`;
	}
	return plainLatex(text);
}

const plainLatex = (text: string) =>
	text
		.replace(/(\d+)\/(\d+)/g, '\\tfrac{$1}{$2}')
		.replace(/(cos|sin|pi)/g, '\\$1 ')
		.replaceAll('*', '\\,');

/** The functional in LaTeX, its observables or probabilities as printExpression chooses them. */
export function printLatex(functional: Functional, options: PrintOptions = {}): string {
	const base = options.indexBase ?? 0;
	const parties = partyCount(functional.scenario);
	const index = (value: number) => (value > 9 ? `{${value}}` : String(value));
	const terms = printableTerms(functional);
	/** C_{10} and E_{10} alone would be correlators of inputs 1 and 0. */
	const product = (observables: readonly Observable[]) => {
		const text = observables
			.map(([p, x]) => `${PARTY_LETTERS[p] ?? '?'}_${index(x + base)}`)
			.join('');
		return named.size === 1 && text.includes('{') ? `\\langle ${text}\\rangle ` : text;
	};
	const named = new Set(terms.flatMap(({ observables }) => observables.map(([party]) => party)));
	const pieces = terms.map(({ coefficient, observables, events }) => {
		const letters = partiesNamed(events, parties);
		const outputs = events.map((event) => event[2]).join(',');
		const inputs = events.map((event) => event[1] + base).join(',');
		const name =
			events.length > 0
				? `P${letters === '' ? '' : `_{${letters}}`}(${outputs}|${inputs})`
				: product(observables);
		const print = (size: Coefficient) =>
			isSum(size) ? `\\left(${coefficientLatex(size)}\\right)` : coefficientLatex(size);
		return signedPiece(coefficient, name, print, '\\,');
	});
	return joinPieces(pieces).replaceAll(' + ', '+').replaceAll(' - ', '-');
}
