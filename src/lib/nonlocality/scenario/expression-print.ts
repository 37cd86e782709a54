import {
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
import { partyCount, type Event } from './scenario';

/** One printed term: a coefficient times observables (output null) or one probability. */
export interface PrintableTerm {
	readonly coefficient: Coefficient;
	readonly observables: readonly (readonly [party: number, input: number])[];
	readonly events: readonly Event[];
}

export interface PrintOptions {
	/** What inputs are counted from. */
	readonly indexBase?: 0 | 1;
}

/**
 * The functional as text that parseExpression reads back (given the same outputs and index base) to
 * the same functional: in observables where every input has two outputs, else in probabilities.
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

/** How every term is shown, marginals first, the constant last. */
export function printableTerms(functional: Functional): PrintableTerm[] {
	const binary = functional.scenario.outputs.flat().every((count) => count === 2);
	const terms = binary
		? observableTerms(functional)
		: functional.terms.map((term) => ({ ...term, observables: [] }));
	const isConstant = (term: PrintableTerm) => term.observables.length + term.events.length === 0;
	return [...terms.filter((t) => !isConstant(t)), ...terms.filter(isConstant)];
}

/** P(a|x) = (1 +- A_x)/2 put in: the unique form in products of observables. */
export function observableTerms(functional: Functional): PrintableTerm[] {
	const sum = new Map<string, { coefficient: Coefficient; events: Event[] }>();
	for (const { coefficient, events } of functional.terms) {
		const share = multiplyCoefficients(
			coefficient,
			exactCoefficient(ratio(1n, 2n ** BigInt(events.length)))
		);
		const opposite = negateCoefficient(share);
		for (let subset = 0; subset < 2 ** events.length; subset++) {
			const chosen = events.filter((_, i) => (subset >> i) & 1);
			const odd = chosen.filter((event) => event[2] === 1).length % 2 === 1;
			const key = chosen.map((event) => `${event[0]}.${event[1]}`).join(' ');
			const before = sum.get(key);
			const added = odd ? opposite : share;
			sum.set(key, {
				coefficient: before ? addCoefficients(before.coefficient, added) : added,
				events: chosen.map(([party, input]): Event => [party, input, 0])
			});
		}
	}
	return [...sum.values()]
		.filter(({ coefficient }) => !isZero(coefficient))
		.sort((a, b) => compareEvents(a.events, b.events))
		.map(({ coefficient, events }) => ({
			coefficient,
			observables: events.map(([party, input]) => [party, input]),
			events: []
		}));
}

/** `P(0,1|1,0)` for all parties, `P_A(0|1)` for some. */
function probabilityName(events: readonly Event[], parties: number, base: 0 | 1): string {
	const letters = events.map(([party]) => PARTY_LETTERS[party] ?? '?').join('');
	const outputs = events.map((event) => event[2]).join(',');
	const inputs = events.map((event) => event[1] + base).join(',');
	return `P${events.length === parties ? '' : `_${letters}`}(${outputs}|${inputs})`;
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
