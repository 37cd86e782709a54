import {
	COEFFICIENT_ONE,
	COEFFICIENT_ZERO,
	addCoefficients,
	isZero,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from '../exact/coefficient';
import {
	cosine,
	checkSize,
	divideCoefficients,
	powerOfCoefficient,
	sine,
	squareRoot
} from '../exact/coefficient-functions';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { ExpressionParser, type ParsedExpression } from './expression-parser';
import { withoutSurroundings } from './expression-surroundings';
import { EXPRESSION_LIMITS } from './expression-tokens';
import { PARTY_LETTERS, type Node } from './expression-tree';
import { readScenario } from './expression-scenario';
import { makeFunctional, type Functional, type Term } from './functional';
import { correlatorTerms } from './observables';
import type { Event } from './scenario';

export { EXPRESSION_LIMITS } from './expression-tokens';

export interface ExpressionOptions {
	/**
	 * What inputs are counted from. `read`: from 1 when no input 0 occurs, else from 0; the answer
	 * says which, for the reader to see. Default 0.
	 */
	readonly indexBase?: 0 | 1 | 'read';
	/** The scenario; left out, the smallest that contains every index. */
	readonly outputs?: readonly (readonly number[])[];
}

export interface ReadExpression {
	readonly functional: Functional;
	/** Null where no index occurs. */
	readonly indexBase: 0 | 1 | null;
	/** True when the base was given, false when it was read. */
	readonly chosen: boolean;
	/** `<= 2` at the end: its text as written. */
	readonly claimedBound: { readonly relation: '<=' | '>=' | '='; readonly text: string } | null;
}

/**
 * Reads a functional as people write it: `A0 B0 + A0 B1 + A1 B0 - A1 B1`, `<A_0 B_1>`, `E(0,1)`,
 * `P(0,1|1,0)`, `P_A(0|1)`, sums and products of these with numbers, also as pasted LaTeX. Parties
 * are A, B, C ...; outputs count from 0.
 * @throws NotationError with position and suggestion; NotationLimitError past EXPRESSION_LIMITS.
 * @example parseExpression('A1 B1 + A1 B2 + A2 B1 - A2 B2 <= 2', { indexBase: 'read' }).indexBase // 1
 */
export function parseExpression(source: string, options: ExpressionOptions = {}): ReadExpression {
	if (source.length > EXPRESSION_LIMITS.characters)
		throw new NotationLimitError(
			`an expression has at most ${EXPRESSION_LIMITS.characters.toLocaleString('en')} characters, this one ${source.length.toLocaleString('en')}`
		);
	const formula = withoutSurroundings(source);
	const parsed = new ExpressionParser(formula).parse();
	const bound = claimedBound(formula, parsed);
	const wanted = options.indexBase ?? 0;
	const { outputs, base } = readScenario(parsed.root, wanted, options.outputs);
	const sum = new Evaluation(base ?? 0).polynomial(parsed.root);
	const terms = [...sum.values()].flatMap(termsOfMonomial);
	if (terms.length > EXPRESSION_LIMITS.probabilities)
		throw new NotationLimitError(
			`written out, an expression has at most ${EXPRESSION_LIMITS.probabilities.toLocaleString('en')} probabilities, this one ${terms.length.toLocaleString('en')}`
		);
	return {
		functional: makeFunctional({ outputs }, terms),
		indexBase: base,
		chosen: wanted !== 'read',
		claimedBound: bound
	};
}

/** What is written at the sign of the relation: `\\leq_{\\text{LHV}} 2`. */
const AT_RELATION = /^\s*(?:[_^]\s*(?:\{(?:[^{}]|\{[^{}]{0,40}\}){0,60}\}|\\?[A-Za-z]+)\s*)+/;
/** `= 2\\sqrt{2} \\approx 2.828`: the same number once more. */
const ONCE_MORE = /\s*(?:\\(?:approx|simeq|sim)(?![A-Za-z])|[\u2248\u2243\u223c]).*$/s;

function claimedBound(
	formula: string,
	{ relation }: ParsedExpression
): ReadExpression['claimedBound'] {
	if (!relation) return null;
	const { sign, position, start } = relation;
	const written = formula.slice(start, relation.end ?? undefined).replace(AT_RELATION, '');
	const text = written
		.replace(ONCE_MORE, '')
		.replace(/[\s&]+$/, '')
		.replace(/^[\s&$]+/, '');
	if (text === '')
		throw new NotationError('the bound after the relation is missing', position, null);
	if (/[A-F]\s*_?\{?\s*\d|[PE]\s*[(_]|\\[lr]angle/.test(text))
		throw new NotationError(
			'the right-hand side has to be a number',
			start,
			'Bring every observable to the left and keep one relation.'
		);
	if (/[<>=\u2264\u2265\u2a7d\u2a7e]|\\(?:[lg]eq?|[lg]eqslant|[lg]t)(?![A-Za-z])/.test(text))
		throw new NotationError(
			'more than one bound is given',
			start,
			'Keep one relation: the bound that is claimed.'
		);
	return { relation: sign, text };
}

/** One factor of a monomial: an observable (output null) or an event. */
interface Factor {
	readonly party: number;
	readonly input: number;
	readonly output: number | null;
}

interface Monomial {
	readonly coefficient: Coefficient;
	/** Of different parties, ordered. */
	readonly factors: readonly Factor[];
}

type Polynomial = ReadonlyMap<string, Monomial>;

function termsOfMonomial({ coefficient, factors }: Monomial): Term[] {
	const events = factors.flatMap(({ party, input, output }): Event[] =>
		output === null ? [] : [[party, input, output]]
	);
	const observables = factors.filter((factor) => factor.output === null);
	return correlatorTerms(
		coefficient,
		observables.map(({ party, input }) => [party, input])
	).map((term) => ({ ...term, events: [...events, ...term.events] }));
}

function collect(monomials: Iterable<Monomial>, position: number): Polynomial {
	const sum = new Map<string, Monomial>();
	for (const monomial of monomials) {
		const key = monomial.factors.map((f) => `${f.party}.${f.input}.${f.output ?? ''}`).join(' ');
		const before = sum.get(key);
		const coefficient = before
			? addCoefficients(before.coefficient, monomial.coefficient)
			: monomial.coefficient;
		sum.set(key, { coefficient, factors: monomial.factors });
		if (sum.size > EXPRESSION_LIMITS.terms)
			throw new NotationLimitError(
				`multiplied out, an expression has at most ${EXPRESSION_LIMITS.terms.toLocaleString('en')} terms`,
				position
			);
	}
	return sum;
}

/** Multiplies a tree out. */
class Evaluation {
	constructor(private readonly base: 0 | 1) {}

	polynomial(node: Node): Polynomial {
		const { position } = node;
		switch (node.kind) {
			case 'number':
				return collect([{ coefficient: node.value, factors: [] }], position);
			case 'sum':
				return collect(
					node.items.flatMap(({ node: item, sign }) => {
						const monomials = [...this.polynomial(item).values()];
						if (sign === 1) return monomials;
						return monomials.map((m) => ({ ...m, coefficient: negateCoefficient(m.coefficient) }));
					}),
					position
				);
			case 'product':
				return node.items.reduce<Polynomial>(
					(product, { node: item, divides }) => {
						if (!divides) return this.multiply(product, this.polynomial(item), item.position);
						const divisor = this.constant(item, 'only a number can be divided by');
						return this.multiply(product, this.inverse(divisor, item.position), item.position);
					},
					collect([{ coefficient: COEFFICIENT_ONE, factors: [] }], position)
				);
			case 'power': {
				const base = this.constant(node.base, 'only a number can be raised to a power');
				const exponent = this.constant(node.exponent, 'an exponent has to be a number');
				return this.apply(() => powerOfCoefficient(base, exponent), position);
			}
			case 'function': {
				const argument = this.constant(node.argument, `${node.name} takes a number`);
				const apply = { sqrt: squareRoot, cos: cosine, sin: sine }[node.name];
				if (!apply) throw new NotationError(`${node.name} is not understood`, position);
				return this.apply(() => apply(argument), position);
			}
			case 'correlator':
			case 'probability': {
				const written =
					node.kind === 'correlator'
						? node.inputs.map((input) => ({ ...input, output: null }))
						: node.events;
				const factors = written
					.map(({ party, index, output }) => ({ party, input: index - this.base, output }))
					.sort((a, b) => a.party - b.party);
				return collect([{ coefficient: COEFFICIENT_ONE, factors }], position);
			}
		}
	}

	private constant(node: Node, message: string): Coefficient {
		const monomials = [...this.polynomial(node).values()].filter((m) => !isZero(m.coefficient));
		const [first] = monomials;
		if (monomials.some((m) => m.factors.length > 0))
			throw new NotationError(message, node.position);
		return first?.coefficient ?? COEFFICIENT_ZERO;
	}

	private inverse(divisor: Coefficient, position: number): Polynomial {
		return this.apply(() => divideCoefficients(COEFFICIENT_ONE, divisor), position);
	}

	/** A scalar operation whose errors get the position. */
	private apply(operation: () => Coefficient, position: number): Polynomial {
		try {
			return collect([{ coefficient: operation(), factors: [] }], position);
		} catch (error) {
			if (error instanceof NotationError && error.position === null)
				throw new NotationError(error.message, position, error.suggestion);
			throw error;
		}
	}

	private multiply(a: Polynomial, b: Polynomial, position: number): Polynomial {
		if (a.size * b.size > EXPRESSION_LIMITS.terms)
			throw new NotationLimitError(
				`multiplied out, an expression has at most ${EXPRESSION_LIMITS.terms.toLocaleString('en')} terms`,
				position
			);
		const products: Monomial[] = [];
		for (const left of a.values()) {
			for (const right of b.values()) {
				const factors = [...left.factors, ...right.factors].sort((x, y) => x.party - y.party);
				const twice = factors.find((f, i) => i > 0 && factors[i - 1]?.party === f.party);
				if (twice)
					throw new NotationError(
						`party ${PARTY_LETTERS[twice.party] ?? ''} occurs twice in one product`,
						position,
						'Each product has at most one observable of each party; put a + or - between terms.'
					);
				const coefficient = multiplyCoefficients(left.coefficient, right.coefficient);
				this.apply(() => (checkSize(coefficient), coefficient), position);
				products.push({ coefficient, factors });
			}
		}
		return collect(products, position);
	}
}
