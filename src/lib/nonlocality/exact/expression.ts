import { create, parseDependencies, type MathJsInstance, type MathNode } from 'mathjs/number';
import {
	addCoefficients,
	exactCoefficient,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from './coefficient';
import {
	PI,
	checkSize,
	cosine,
	divideCoefficients,
	powerOfCoefficient,
	sine,
	squareRoot,
	subtractCoefficients
} from './coefficient-functions';
import { NotationError } from './notation-error';
import { plainNotation } from './plain-notation';
import { parseRational } from './rational';

/** Longest text and deepest parentheses of one number. */
export const COEFFICIENT_LIMITS = { characters: 500, depth: 50, exponentDigits: 3 } as const;

/** A plain fraction may be longer: two numbers of LARGEST_BITS. */
const LONGEST_FRACTION = 700;

/** A number whose double is less certain than this, relative to max(1, |value|), is refused. */
const LARGEST_RELATIVE_ERROR = 1e-9;

type OneNumber = (a: Coefficient) => Coefficient;

const FUNCTIONS: ReadonlyMap<string, OneNumber> = new Map([
	['sqrt', squareRoot],
	['cos', cosine],
	['sin', sine]
]);

const UNARY: ReadonlyMap<string, OneNumber> = new Map([
	['unaryMinus', negateCoefficient],
	['unaryPlus', (a: Coefficient) => a]
]);

const BINARY: ReadonlyMap<string, (a: Coefficient, b: Coefficient) => Coefficient> = new Map([
	['add', addCoefficients],
	['subtract', subtractCoefficients],
	['multiply', multiplyCoefficients],
	['divide', divideCoefficients],
	['pow', powerOfCoefficient]
]);

const TOKEN = /(\d+\.?\d*|\.\d+)(?:[eE]([+-]?\d+))?|[A-Za-z]+|\S/g;

/**
 * Reads a number: an integer, decimal, fraction, or an expression of + - * / ^ sqrt cos sin pi and
 * numbers, also as LaTeX (`\frac{1}{2}`, `2\sqrt{2}`). Rational arithmetic stays exact, and so do
 * square roots of rationals and cosines of multiples of pi/6 and pi/4. Nothing is ever evaluated
 * by the expression library: its tree is walked with an allow-list.
 * @throws NotationError with a position, for anything else, NaN and infinity included.
 * @example parseCoefficient('2*sqrt(2)').value // 2.8284271247461903
 */
export function parseCoefficient(source: string): Coefficient {
	const quick = source.length <= LONGEST_FRACTION ? parseRational(source) : null;
	if (quick) return checked(exactCoefficient(quick));
	if (source.length > COEFFICIENT_LIMITS.characters)
		throw new NotationError(`a number of more than ${COEFFICIENT_LIMITS.characters} characters`, 0);
	const plain = plainNotation(source);
	const text = plain.text.replaceAll('{', '(').replaceAll('}', ')');
	const original = (index: number) => plain.positions[index] ?? null;
	const literals = readLiterals(text, original);
	return checked(new Walk(literals).read(parseTree(text, original)));
}

interface Literal {
	readonly text: string;
	readonly position: number | null;
}

/** Refuses every token outside the allow-list, and collects the numbers as they are written. */
function readLiterals(text: string, original: (index: number) => number | null): Literal[] {
	const literals: Literal[] = [];
	let depth = 0;
	let before = '';
	for (const match of text.matchAll(TOKEN)) {
		const [token, number, exponent] = match;
		const position = original(match.index);
		if (number !== undefined) {
			if ((exponent ?? '').replace(/[+-]/, '').length > COEFFICIENT_LIMITS.exponentDigits)
				throw new NotationError(`the exponent of ${token} is too large`, position);
			literals.push({ text: token, position });
		} else if (/^[A-Za-z]/.test(token)) {
			const digit = /^\d/.exec(text.slice(match.index + token.length));
			if (digit) throw unknownWord(token + digit[0], position);
			if (token !== 'pi' && !FUNCTIONS.has(token)) throw unknownWord(token, position);
			if (/\/\s*[\d.]+$/.test(text.slice(0, match.index)))
				throw new NotationError(
					`it is not clear whether ${token} belongs below the fraction bar`,
					position,
					`Write a * before ${token}, or parentheses around what stands below.`
				);
		} else if (token === '(') {
			if (++depth > COEFFICIENT_LIMITS.depth)
				throw new NotationError(
					`more than ${COEFFICIENT_LIMITS.depth} levels of parentheses`,
					position
				);
		} else if (token === ')') {
			depth--;
		} else if (!'+-*/^'.includes(token)) {
			throw new NotationError(`${printable(token)} has no meaning in a number`, position);
		} else if (/^[*/^]/.test(token) && /[*/^]$/.test(before)) {
			throw new NotationError(`two operators, ${before}${token}, one after the other`, position);
		}
		before = token;
	}
	if (literals.length === 0 && !text.includes('pi'))
		throw new NotationError(
			text.trim() === '' ? 'a number is missing' : 'there is no number here',
			0
		);
	return literals;
}

const printable = (token: string) => (/^[!-~]$/.test(token) ? token : 'this character');

function unknownWord(word: string, position: number | null): NotationError {
	const known = /^(sqrt|cos|sin|pi)/.exec(word.toLowerCase())?.[0];
	const suggestion = known
		? `Write ${known}${known === 'pi' ? '' : '(...)'}, in lower case and on its own.`
		: 'Only sqrt, cos, sin and pi are understood.';
	return new NotationError(`${word} is not a number`, position, suggestion);
}

let library: MathJsInstance | null = null;

function parseTree(text: string, original: (index: number) => number | null): MathNode {
	library ??= create(parseDependencies ?? {});
	try {
		return library.parse(text);
	} catch (error) {
		const at = error instanceof SyntaxError && 'char' in error ? Number(error.char) - 1 : NaN;
		const position = original(Math.max(0, Math.min(at, text.length)));
		const ends = at >= text.trimEnd().length;
		throw new NotationError(
			ends ? 'the number ends too early' : 'this is not a number as it stands',
			position,
			'Check the operators and parentheses here.'
		);
	}
}

class Walk {
	/** Constants come in the order they are written, so the next one is always known. */
	private next = 0;

	constructor(private readonly literals: readonly Literal[]) {}

	read(node: MathNode): Coefficient {
		const start = this.literals[this.next]?.position ?? null;
		try {
			const value = this.visit(node);
			checkSize(value);
			return value;
		} catch (error) {
			if (error instanceof NotationError && error.position === null)
				throw new NotationError(error.message, start, error.suggestion);
			throw error;
		}
	}

	private visit(node: MathNode): Coefficient {
		if (isNode(node, 'ParenthesisNode')) return this.read(node.content);
		if (isNode(node, 'ConstantNode')) return this.constant();
		if (isNode(node, 'SymbolNode') && node.name === 'pi') return PI;
		if (isNode(node, 'FunctionNode')) {
			const name = node.fn.name;
			const apply = FUNCTIONS.get(name);
			const [argument, second] = node.args;
			if (!apply || !argument || second) throw new NotationError(`${name} takes one number`);
			return apply(this.read(argument));
		}
		if (isNode(node, 'SymbolNode'))
			throw new NotationError(`${node.name} needs parentheses`, null, `Write ${node.name}(...).`);
		if (isNode(node, 'OperatorNode')) return this.operator(node);
		throw new NotationError(
			'this is not a number',
			null,
			'Only sqrt, cos, sin and pi are understood.'
		);
	}

	private constant(): Coefficient {
		const literal = this.literals[this.next++];
		const value = literal && parseRational(literal.text);
		if (!value) throw new NotationError('this number is not understood');
		return exactCoefficient(value);
	}

	private operator(node: NodeTypes['OperatorNode']): Coefficient {
		const [a, b] = node.args.map((argument) => this.read(argument));
		const unary = UNARY.get(node.fn);
		if (unary && a) return unary(a);
		const divisor = node.fn === 'divide' && node.args[1];
		if (divisor && isNode(divisor, 'OperatorNode') && divisor.implicit)
			throw new NotationError(
				'it is not clear what belongs below the fraction bar',
				null,
				'Write a *, or parentheses around what stands below.'
			);
		const binary = BINARY.get(node.fn);
		if (binary && a && b) return binary(a, b);
		throw new NotationError(`${node.op} is not understood here`);
	}
}

/** The nodes the walk knows; anything else is refused. */
interface NodeTypes {
	ParenthesisNode: MathNode & { readonly content: MathNode };
	ConstantNode: MathNode & { readonly value: unknown };
	SymbolNode: MathNode & { readonly name: string };
	FunctionNode: MathNode & { readonly fn: { readonly name: string }; readonly args: MathNode[] };
	OperatorNode: MathNode & {
		readonly op: string;
		readonly fn: string;
		readonly args: MathNode[];
		readonly implicit: boolean;
	};
}

function isNode<T extends keyof NodeTypes>(node: MathNode, type: T): node is NodeTypes[T] {
	return node.type === type;
}

function checked(value: Coefficient): Coefficient {
	if (!Number.isFinite(value.value) || !Number.isFinite(value.error))
		throw new NotationError('the number is too large', 0);
	checkSize(value);
	if (value.error > LARGEST_RELATIVE_ERROR * Math.max(1, Math.abs(value.value)))
		throw new NotationError("this number can't be computed accurately enough", 0);
	if (!value.exact && value.text.length > COEFFICIENT_LIMITS.characters)
		throw new NotationError('too many irrational numbers in one coefficient', 0);
	return value;
}
