import { parseCoefficient } from '../exact/expression';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { readCorrelator, startsCorrelator } from './expression-correlator';
import { partyOf } from './expression-indices';
import { readProbability } from './expression-probability';
import { EXPRESSION_LIMITS, type Token } from './expression-tokens';
import { PARTY_LETTERS, type Node } from './expression-tree';
import { CLOSING, TokenReader, readSubscript } from './token-reader';

/** A formula's tree, and the relation to a bound that stands behind it, or in front. */
export interface ParsedExpression {
	readonly root: Node;
	readonly relation: {
		/** As it is read with the formula on its left. */
		readonly sign: '<=' | '>=' | '=';
		readonly position: number;
		/** Where the bound is written. */
		readonly start: number;
		readonly end: number | null;
	} | null;
}

const FLIPPED = { '<=': '>=', '>=': '<=', '=': '=' } as const;

function relationOf({ kind, text }: Token): '<=' | '>=' | '=' | null {
	if (kind !== 'relation' && !(kind === 'symbol' && '<>='.includes(text))) return null;
	return text.includes('<') ? '<=' : text.includes('>') ? '>=' : '=';
}

/** Whether nothing but numbers occurs. */
function isNumber(node: Node): boolean {
	switch (node.kind) {
		case 'number':
			return true;
		case 'sum':
		case 'product':
			return node.items.every((item) => isNumber(item.node));
		case 'power':
			return isNumber(node.base) && isNumber(node.exponent);
		case 'function':
			return isNumber(node.argument);
		case 'correlator':
		case 'probability':
			return false;
	}
}

/**
 * expression := sum [relation anything] | number relation sum
 * sum := ['+'|'-'] product (('+'|'-') product)*
 * product := power (['*'|'/'] power)*            (left to right; nothing between: times)
 * power := primary ['^' primary]
 * primary := number | pi | function '(' sum ')' | '(' sum ')' | '<' sum '>' | observable
 *          | E(x,y) | E(A0,B1) | P(a,b|x,y) | P_A(a|x) | P(a=0,b=1|x=0,y=1) | P(A0=0,B1=1)
 * @throws NotationError with position and suggestion.
 */
export class ExpressionParser {
	private readonly reader: TokenReader;
	private depth = 0;
	/** Whether this is inside < and >. */
	private bracketed = false;

	constructor(source: string) {
		this.reader = new TokenReader(source);
	}

	parse(): ParsedExpression {
		if (this.reader.peek().kind === 'end')
			throw new NotationError(
				'the expression is empty',
				0,
				'Write for example A0 B0 + A0 B1 + A1 B0 - A1 B1.'
			);
		const root = this.sum();
		const token = this.reader.peek();
		if (token.kind === 'end') return { root, relation: null };
		const sign = relationOf(token);
		if (!sign) throw this.unexpected(token);
		this.reader.take();
		const { position } = token;
		const start = this.reader.peek().position;
		if (!isNumber(root) || !this.reader.hasObservables())
			return { root, relation: { sign, position, start, end: null } };
		// `2 >= A0 B0 + ...`
		const formula = this.sum();
		const next = this.reader.peek();
		if (relationOf(next))
			throw new NotationError(
				'the expression stands between two bounds',
				next.position,
				'Keep one relation: the bound that is claimed.'
			);
		if (next.kind !== 'end') throw this.unexpected(next);
		return { root: formula, relation: { sign: FLIPPED[sign], position, start: 0, end: position } };
	}

	private sum(): Node {
		const { position } = this.reader.peek();
		const items: { node: Node; sign: 1 | -1 }[] = [];
		do {
			let sign: 1 | -1 = 1;
			while ('+-'.includes(this.reader.peek().text) && this.reader.peek().kind === 'symbol')
				if (this.reader.take().text === '-') sign = sign === 1 ? -1 : 1;
			items.push({ node: this.product(), sign });
		} while (this.reader.peek().kind === 'symbol' && '+-'.includes(this.reader.peek().text));
		const [only] = items;
		return items.length === 1 && only?.sign === 1 ? only.node : { kind: 'sum', items, position };
	}

	private product(): Node {
		const { position } = this.reader.peek();
		const items = [{ node: this.power(), divides: false }];
		let divisor: Token | null = null;
		for (;;) {
			const token = this.reader.peek();
			const operator = token.kind === 'symbol' && '*/'.includes(token.text);
			if (operator) {
				this.reader.take();
				divisor = token.text === '/' ? this.reader.peek() : null;
				let negative = false;
				while (this.reader.peek().kind === 'symbol' && '+-'.includes(this.reader.peek().text))
					if (this.reader.take().text === '-') negative = !negative;
				const node = this.power();
				const signed = negative
					? ({ kind: 'sum', items: [{ node, sign: -1 }], position: node.position } as const)
					: node;
				items.push({ node: signed, divides: token.text === '/' });
			} else if (this.startsFactor(token)) {
				this.refuseUnclearFraction(divisor, token);
				divisor = null;
				items.push({ node: this.power(), divides: false });
			} else break;
		}
		const [only] = items;
		return items.length === 1 && only ? only.node : { kind: 'product', items, position };
	}

	/** 1/2sqrt(2) and 1/sqrt(2) sqrt(3): nobody can say what stands below the bar. */
	private refuseUnclearFraction(divisor: Token | null, token: Token): void {
		const isNumber = token.kind === 'function' || token.kind === 'number';
		if (!divisor || !isNumber || divisor.text === '(') return;
		if (divisor.kind === 'number' && token.spaced) return;
		throw new NotationError(
			`it is not clear whether ${token.text} belongs below the fraction bar`,
			token.position,
			`Write a * before ${token.text}, or parentheses around what stands below.`
		);
	}

	private startsFactor(token: Token): boolean {
		if (token.kind === 'number' || token.kind === 'letter' || token.kind === 'function')
			return true;
		if (token.text !== '<') return '([{'.includes(token.text) && token.kind === 'symbol';
		// After an operand, `<` opens a correlator only when one follows; else it is a relation.
		const after = this.reader.peek(1);
		return after.kind === 'letter' || '([{'.includes(after.text);
	}

	private power(): Node {
		const base = this.primary();
		if (!this.reader.accept('^')) return base;
		const { position } = this.reader.peek();
		const negative = this.reader.accept('-');
		const exponent = this.primary();
		const signed: Node = negative
			? { kind: 'sum', items: [{ node: exponent, sign: -1 }], position }
			: exponent;
		return { kind: 'power', base, exponent: signed, position: base.position };
	}

	private primary(): Node {
		const token = this.reader.take();
		const { position, text } = token;
		if (token.kind === 'number') return { kind: 'number', value: parseCoefficient(text), position };
		if (text === 'pi') return { kind: 'number', value: parseCoefficient('pi'), position };
		if (token.kind === 'function') {
			if (!this.reader.accept('('))
				throw new NotationError(`${text} needs parentheses`, position, `Write ${text}(...).`);
			return { kind: 'function', name: text, argument: this.group('(', position), position };
		}
		if (token.kind === 'letter') return this.letter(token);
		if (CLOSING[text] !== undefined) return this.group(text, position);
		throw this.unexpected(token);
	}

	private group(opening: string, position: number): Node {
		if (++this.depth > EXPRESSION_LIMITS.nesting)
			throw new NotationLimitError(
				`an expression has at most ${EXPRESSION_LIMITS.nesting} levels of parentheses`,
				position
			);
		const outside = this.bracketed;
		this.bracketed ||= opening === '<';
		const node = this.sum();
		this.bracketed = outside;
		const closing = CLOSING[opening] ?? ')';
		if (closing === '>') this.reader.splitRelation();
		if (!this.reader.accept(closing)) {
			if (this.reader.peek().kind !== 'end') throw this.unexpected(this.reader.peek());
			throw new NotationError(`this ${opening} is never closed`, position, `Add a ${closing}.`);
		}
		this.depth--;
		return node;
	}

	private letter(token: Token): Node {
		const { text, position } = token;
		if (text === 'P' || text === 'p' || text === 'Pr')
			return readProbability(this.reader, position, (letter, at) => this.unknownLetter(letter, at));
		if (startsCorrelator(this.reader, text, this.bracketed))
			return readCorrelator(this.reader, position);
		const party = partyOf(text);
		if (party === null) throw this.unknownLetter(text, position);
		const index = readSubscript(this.reader, text);
		if (this.reader.peek().text === '^')
			throw new NotationError(
				'an observable has no upper index and no power',
				this.reader.peek().position,
				'Parties are A, B, C: write A_0 B_1 for A_0^{(1)} A_1^{(2)}. The square of an observable is 1.'
			);
		if (index === null)
			throw new NotationError(`${text} needs an input`, position, `Write ${text}0 or ${text}1.`);
		return { kind: 'correlator', inputs: [{ party, index, position }], everyone: false, position };
	}

	private unknownLetter(text: string, position: number): NotationError {
		const upper = text.toUpperCase();
		if (PARTY_LETTERS.includes(upper))
			return new NotationError(
				`${text} is not a party`,
				position,
				`Write ${upper}0 for the observable of party ${upper}.`
			);
		if (text === 'i')
			return new NotationError(
				'the imaginary unit has no place in a functional',
				position,
				'Coefficients are real: take the real part first.'
			);
		if (this.reader.hasRelation())
			return new NotationError(
				`${text} is not a party`,
				position,
				'Enter the right-hand side alone, without its name.'
			);
		return new NotationError(
			`${text} is not a party`,
			position,
			'Parties are A, B, C, D, E and F, in this order.'
		);
	}

	private unexpected(token: Token): NotationError {
		const { text, position } = token;
		if (token.kind === 'end')
			return new NotationError(
				'the expression ends too early',
				position,
				'Something is missing at its end.'
			);
		if (text === ',')
			return new NotationError(
				"a comma can't stand here",
				position,
				'Write a decimal as 0.5, thousands without a comma, and one formula at a time.'
			);
		if (text === '|')
			return new NotationError(
				'absolute values are not linear',
				position,
				'Enter the expression without the bars.'
			);
		if (')]}>'.includes(text) && token.kind === 'symbol')
			return new NotationError(
				`this ${text} was never opened`,
				position,
				'Leave it out, or open it before.'
			);
		if (token.kind === 'relation' || '<>='.includes(text))
			return new NotationError(
				`${text} can't stand here`,
				position,
				'Put the relation and the bound at the end.'
			);
		return new NotationError(`${text} can't stand here`, position);
	}
}
