import {
	COEFFICIENT_ZERO,
	addCoefficients,
	exactCoefficient,
	isZero,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from '../exact/coefficient';
import { ratio } from '../exact/rational';
import { PARTY_LETTERS } from './expression-tree';
import { compareEvents, type Functional } from './functional';
import type { Observable } from './observables';
import { partyCount, type Event } from './scenario';

/** One printed term: a coefficient times observables (output null) or one probability. */
export interface PrintableTerm {
	readonly coefficient: Coefficient;
	readonly observables: readonly Observable[];
	readonly events: readonly Event[];
}

export interface PrintOptions {
	/** What inputs are counted from. */
	readonly indexBase?: 0 | 1;
}

/**
 * The functional as text that parseExpression reads back (given the same outputs and index base) to
 * the same functional: in observables or probabilities, as printableTerms chooses.
 */
export function printExpression(functional: Functional, options: PrintOptions = {}): string {
	const base = options.indexBase ?? 0;
	const parties = partyCount(functional.scenario);
	const pieces = printableTerms(functional).map(({ coefficient, observables, events }) => {
		const name =
			events.length > 0
				? probabilityName(events, parties, base)
				: observables.map(([p, x]) => `${PARTY_LETTERS[p] ?? '?'}${x + base}`).join(' ');
		return signedPiece(coefficient, name, printCoefficient);
	});
	return joinPieces(pieces);
}

/**
 * How every term is shown: in observables where every input has two outputs, unless probabilities
 * take fewer terms. Marginals come first, the constant last.
 */
export function printableTerms(functional: Functional): PrintableTerm[] {
	const asWritten = functional.terms.map((term) => ({ ...term, observables: [] }));
	const binary = functional.scenario.outputs.flat().every((count) => count === 2);
	const observables = binary ? observableTerms(functional) : null;
	const terms = observables && observables.length <= asWritten.length ? observables : asWritten;
	const isConstant = (term: PrintableTerm) => term.observables.length + term.events.length === 0;
	return [...terms.filter((t) => !isConstant(t)), ...terms.filter(isConstant)];
}

/**
 * P(a|x) = (1 + (-1)^a A_x)/2 put in: the unique form in products of observables. Terms on the same
 * inputs are transformed together, one party after the other (a Walsh-Hadamard transform).
 */
export function observableTerms(functional: Functional): PrintableTerm[] {
	const groups = new Map<string, { inputs: Observable[]; values: Coefficient[] }>();
	for (const { coefficient, events } of functional.terms) {
		const inputs = events.map(([party, input]): Observable => [party, input]);
		const key = inputs.join(' ');
		const group = groups.get(key) ?? {
			inputs,
			values: Array.from({ length: 2 ** inputs.length }, () => COEFFICIENT_ZERO)
		};
		const outputs = events.reduce((bits, event, i) => bits | (event[2] << i), 0);
		group.values[outputs] = coefficient;
		groups.set(key, group);
	}
	const sum = new Map<string, PrintableTerm>();
	for (const { inputs, values } of groups.values()) {
		transform(values);
		const scale = exactCoefficient(ratio(1n, BigInt(values.length)));
		values.forEach((value, subset) => {
			if (isZero(value)) return;
			const observables = inputs.filter((_, i) => (subset >> i) & 1);
			const key = observables.join(' ');
			const before = sum.get(key)?.coefficient ?? COEFFICIENT_ZERO;
			const coefficient = addCoefficients(before, multiplyCoefficients(value, scale));
			sum.set(key, { coefficient, observables, events: [] });
		});
	}
	const events = (term: PrintableTerm) => term.observables.map(([p, x]): Event => [p, x, 0]);
	return [...sum.values()]
		.filter(({ coefficient }) => !isZero(coefficient))
		.sort((a, b) => compareEvents(events(a), events(b)));
}

/** values[outputs] becomes sum over outputs of (-1)^(outputs in the subset) values, by subset. */
function transform(values: Coefficient[]): void {
	for (let step = 1; step < values.length; step *= 2) {
		for (let i = 0; i < values.length; i++) {
			const [even, odd] = [values[i], values[i + step]];
			if ((i & step) !== 0 || !even || !odd) continue;
			values[i] = addCoefficients(even, odd);
			values[i + step] = addCoefficients(even, negateCoefficient(odd));
		}
	}
}

/**
 * The letters of the parties in a probability: none where it is one of all parties, unless that is
 * a single party with an index of two digits, which could be the indices of two.
 */
export function partiesNamed(events: readonly Event[], parties: number): string {
	const isClear = parties > 1 || events.every(([, x, a]) => x < 9 && a < 10);
	if (events.length === parties && isClear) return '';
	return events.map(([party]) => PARTY_LETTERS[party] ?? '?').join('');
}

/** `P(0,1|1,0)` for all parties, `P_A(0|1)` for some. */
function probabilityName(events: readonly Event[], parties: number, base: 0 | 1): string {
	const letters = partiesNamed(events, parties);
	const outputs = events.map((event) => event[2]).join(',');
	const inputs = events.map((event) => event[1] + base).join(',');
	return `P${letters === '' ? '' : `_${letters}`}(${outputs}|${inputs})`;
}

/** True when a coefficient prints as a sum, and needs parentheses before a product. */
export const isSum = (coefficient: Coefficient): boolean =>
	coefficient.parts.length + (coefficient.rational.n === 0n ? 0 : 1) > 1;

const printCoefficient = (size: Coefficient): string =>
	isSum(size) ? `(${size.text})` : size.text;

export interface SignedPiece {
	readonly negative: boolean;
	readonly text: string;
}

/** The sign of a single number apart, a coefficient of 1 left out. */
export function signedPiece(
	coefficient: Coefficient,
	name: string,
	print: (size: Coefficient) => string,
	space = ' '
): SignedPiece {
	const negative = !isSum(coefficient) && coefficient.text.startsWith('-');
	const size = negative ? negateCoefficient(coefficient) : coefficient;
	if (name === '') return { negative, text: print(size) };
	return { negative, text: size.exact?.equals(1) ? name : `${print(size)}${space}${name}` };
}

export function joinPieces(pieces: readonly SignedPiece[]): string {
	if (pieces.length === 0) return '0';
	return pieces
		.map(({ negative, text }, i) => {
			if (i === 0) return negative ? `-${text}` : text;
			return `${negative ? ' - ' : ' + '}${text}`;
		})
		.join('');
}
