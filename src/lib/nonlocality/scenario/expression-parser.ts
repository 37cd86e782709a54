import { parseCoefficient } from '../exact/expression';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { EXPRESSION_LIMITS, tokenize, type Token } from './expression-tokens';
import { PARTY_LETTERS, type Node, type WrittenEvent } from './expression-tree';

/** A formula's tree, and where its trailing relation stands. */
export interface ParsedExpression {
	readonly root: Node;
	readonly relation: {
		readonly text: string;
		readonly end: number;
		readonly position: number;
	} | null;
}

const CLOSING: Readonly<Record<string, string>> = { '(': ')', '[': ']', '{': '}', '<': '>' };

/**
 * expression := sum [relation anything]
 * sum := ['+'|'-'] product (('+'|'-') product)*
 * product := power (['*'|'/'] power)*            (left to right; nothing between: times)
 * power := primary ['^' primary]
 * primary := number | pi | function '(' sum ')' | '(' sum ')' | '<' sum '>' | observable
 *          | E(x,y) | P(a,b|x,y) | P_A(a|x)
 * @throws NotationError with position and suggestion.
 */
export class ExpressionParser {
	private readonly tokens: Token[];
	private next = 0;
	private depth = 0;
	/** E_{01} is a correlator only where no other party is named by its letter. */
	private readonly namesParties: boolean;

	constructor(source: string) {
		this.tokens = tokenize(source);
		this.namesParties = this.tokens.some((t) => t.kind === 'letter' && 'ABCD'.includes(t.text));
	}

	parse(): ParsedExpression {
		if (this.peek().kind === 'end')
			throw new NotationError(
				'the expression is empty',
				0,
				'Write for example A0 B0 + A0 B1 + A1 B0 - A1 B1.'
			);
		const root = this.sum();
		const token = this.peek();
		if (token.kind === 'end') return { root, relation: null };
		if (token.kind !== 'relation' && !'<>='.includes(token.text)) throw this.unexpected(token);
		this.next++;
		return {
			root,
			relation: { text: token.text, position: token.position, end: this.peek().position }
		};
	}

	private peek(ahead = 0): Token {
		const token = this.tokens[Math.min(this.next + ahead, this.tokens.length - 1)];
		if (!token) throw new Error('a token list always has an end');
		return token;
	}

	private take(): Token {
		const token = this.peek();
		this.next++;
		return token;
	}

	private accept(text: string): boolean {
		if (this.peek().text !== text) return false;
		this.next++;
		return true;
	}

	private sum(): Node {
		const { position } = this.peek();
		const items: { node: Node; sign: 1 | -1 }[] = [];
		do {
			let sign: 1 | -1 = 1;
			while ('+-'.includes(this.peek().text) && this.peek().kind === 'symbol')
				if (this.take().text === '-') sign = sign === 1 ? -1 : 1;
			items.push({ node: this.product(), sign });
		} while (this.peek().kind === 'symbol' && '+-'.includes(this.peek().text));
		const [only] = items;
		return items.length === 1 && only?.sign === 1 ? only.node : { kind: 'sum', items, position };
	}

	private product(): Node {
		const { position } = this.peek();
		const items = [{ node: this.power(), divides: false }];
		let divisor: Token | null = null;
		for (;;) {
			const token = this.peek();
			const operator = token.kind === 'symbol' && '*/'.includes(token.text);
			if (operator) {
				this.next++;
				divisor = token.text === '/' ? this.peek() : null;
				let negative = false;
				while (this.peek().kind === 'symbol' && '+-'.includes(this.peek().text))
					if (this.take().text === '-') negative = !negative;
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
		const after = this.peek(1);
		return after.kind === 'letter' || '([{'.includes(after.text);
	}

	private power(): Node {
		const base = this.primary();
		if (!this.accept('^')) return base;
		const { position } = this.peek();
		const negative = this.accept('-');
		const exponent = this.primary();
		const signed: Node = negative
			? { kind: 'sum', items: [{ node: exponent, sign: -1 }], position }
			: exponent;
		return { kind: 'power', base, exponent: signed, position: base.position };
	}

	private primary(): Node {
		const token = this.take();
		const { position, text } = token;
		if (token.kind === 'number') return { kind: 'number', value: parseCoefficient(text), position };
		if (text === 'pi') return { kind: 'number', value: parseCoefficient('pi'), position };
		if (token.kind === 'function') {
			if (!this.accept('('))
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
		const node = this.sum();
		const closing = CLOSING[opening] ?? ')';
		if (closing === '>') this.splitRelation();
		if (!this.accept(closing)) {
			if (this.peek().kind !== 'end') throw this.unexpected(this.peek());
			throw new NotationError(`this ${opening} is never closed`, position, `Add a ${closing}.`);
		}
		this.depth--;
		return node;
	}

	/** `<A0 B0>=2` closes the bracket first: its `>=` is a `>` and a `=`. */
	private splitRelation(): void {
		const token = this.peek();
		if (token.text !== '>=') return;
		const symbol = { ...token, kind: 'symbol' } as const;
		this.tokens.splice(this.next, 1, { ...symbol, text: '>' }, { ...symbol, text: '=' });
	}

	private letter(token: Token): Node {
		const { text, position } = token;
		const after = this.peek();
		if (text === 'P' || text === 'p' || text === 'Pr') return this.probability(position);
		if (text === 'E' && (after.text === '(' || this.isSubscriptedCorrelator()))
			return this.expectation(position);
		const party = PARTY_LETTERS.indexOf(text);
		if (party < 0) throw this.unknownLetter(token);
		const index = this.subscript();
		if (index === null)
			throw new NotationError(`${text} needs an input`, position, `Write ${text}0 or ${text}1.`);
		return { kind: 'correlator', inputs: [{ party, index, position }], everyone: false, position };
	}

	private unknownLetter({ text, position }: Token): NotationError {
		const upper = text.toUpperCase();
		if (PARTY_LETTERS.includes(upper))
			return new NotationError(
				`${text} is not a party`,
				position,
				`Write ${upper}0 for the observable of party ${upper}.`
			);
		if (this.tokens.some((t) => t.text === '=' || t.kind === 'relation'))
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

	/** `0`, `_0`, `_{0}`: an index of one party. */
	private subscript(): number | null {
		const start = this.next;
		const marked = this.accept('_');
		const braced = marked && this.accept('{');
		const token = this.take();
		const closes = !braced || this.accept('}');
		if (token.kind === 'number' && /^\d+$/.test(token.text) && closes) return Number(token.text);
		this.next = start;
		return null;
	}

	/** E_{0,1}, or E_{01} where no party is named. */
	private isSubscriptedCorrelator(): boolean {
		if (this.peek().text !== '_') return false;
		const braced = this.peek(1).text === '{';
		const first = this.peek(braced ? 2 : 1);
		if (braced && this.peek(3).text === ',') return true;
		return !this.namesParties && /^\d{2,}$/.test(first.text);
	}

	private expectation(position: number): Node {
		this.accept('_');
		const opening = this.peek().text;
		const closing = CLOSING[opening];
		if (closing !== undefined) this.next++;
		const written = this.indices(closing === undefined ? [] : [closing], position, 'E(0,1)');
		if (closing !== undefined) this.next++;
		const list =
			written.length === 1 && (written[0]?.length ?? 0) > 1 ? [...(written[0] ?? '')] : written;
		const inputs = list.map((digits, party) => ({ party, index: Number(digits), position }));
		this.checkPartyCount(inputs.length, position);
		return { kind: 'correlator', inputs, everyone: true, position };
	}

	/** Numbers with or without commas between them, up to (not including) one of `closing`. */
	private indices(closing: readonly string[], position: number, example: string): string[] {
		const found: string[] = [];
		for (;;) {
			const token = this.peek();
			if (found.length > 0 && closing.includes(token.text)) return found;
			if (token.kind !== 'number' || !/^\d+$/.test(token.text)) {
				const place = token.kind === 'end' ? position : token.position;
				throw new NotationError(
					'the indices here have to be numbers',
					place,
					`Write them as in ${example}.`
				);
			}
			found.push(token.text);
			this.next++;
			if (closing.length === 0) return found;
			this.accept(',');
		}
	}

	private probability(position: number): Node {
		const example = 'P(0,1|1,0) or P_A(0|1)';
		const named = this.accept('_') ? this.partyNames(position, example) : null;
		if (!this.accept('('))
			throw new NotationError('P needs outputs and inputs', position, `Write ${example}.`);
		const outputs = this.indices(['|'], position, example);
		this.next++;
		const inputs = this.indices([')'], position, example);
		this.next++;
		const [a, x] = this.alignIndices(outputs, inputs, named?.length ?? null, position);
		const parties = named ?? a.map((_, party) => party);
		this.checkPartyCount(parties.length, position);
		const events = parties.map((party, i): WrittenEvent => ({
			party,
			index: Number(x[i]),
			output: Number(a[i]),
			position
		}));
		if (new Set(parties).size < parties.length)
			throw new NotationError('a party occurs twice in this probability', position);
		return { kind: 'probability', events, everyone: named === null, position };
	}

	/** The parties of P_A, P_AB, P_{AB} or P_{A,B}. */
	private partyNames(position: number, example: string): number[] {
		const braced = this.accept('{');
		const parties: number[] = [];
		while (this.peek().kind === 'letter') {
			const token = this.take();
			const party = PARTY_LETTERS.indexOf(token.text);
			if (party < 0) throw this.unknownLetter(token);
			parties.push(party);
			if (braced) this.accept(',');
		}
		if (parties.length === 0 || (braced && !this.accept('}')))
			throw new NotationError('P_ needs the letters of its parties', position, `Write ${example}.`);
		return parties;
	}

	/** P(01|10) is P(0,1|1,0): runs of single digits are split where that is the only reading. */
	private alignIndices(
		outputs: string[],
		inputs: string[],
		parties: number | null,
		position: number
	): [string[], string[]] {
		const spread = (list: string[]) => {
			const [run] = list;
			const wanted = parties ?? run?.length;
			return list.length === 1 && run && run.length === wanted ? [...run] : list;
		};
		const [a, x] = [spread(outputs), spread(inputs)];
		const count = parties ?? a.length;
		if (a.length === count && x.length === count) return [a, x];
		throw new NotationError(
			parties === null
				? `${a.length} outputs for ${x.length} inputs`
				: `${parties} parties are named, with ${a.length} outputs and ${x.length} inputs`,
			position,
			'Write one output and one input per party, with commas between: P(0,1|1,0).'
		);
	}

	private checkPartyCount(count: number, position: number): void {
		if (count > EXPRESSION_LIMITS.parties)
			throw new NotationLimitError(
				`an expression has at most ${EXPRESSION_LIMITS.parties} parties`,
				position
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
