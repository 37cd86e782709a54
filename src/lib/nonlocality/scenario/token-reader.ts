import { NotationError } from '../exact/notation-error';
import { tokenize, type Token } from './expression-tokens';

/** The bracket that closes each. */
export const CLOSING: Readonly<Record<string, string>> = { '(': ')', '[': ']', '{': '}', '<': '>' };

/** Walks a formula's tokens; every part of the grammar reads from the same one. */
export class TokenReader {
	private readonly tokens: Token[];
	private next = 0;

	constructor(source: string) {
		this.tokens = tokenize(source);
	}

	peek(ahead = 0): Token {
		const token = this.tokens[Math.min(this.next + ahead, this.tokens.length - 1)];
		if (!token) throw new Error('a token list always has an end');
		return token;
	}

	take(): Token {
		const token = this.peek();
		this.next++;
		return token;
	}

	accept(text: string): boolean {
		if (this.peek().text !== text) return false;
		this.next++;
		return true;
	}

	/** Whether one of these letters stands anywhere in the formula. */
	names(letters: string): boolean {
		return this.tokens.some(({ kind, text }) => kind === 'letter' && letters.includes(text));
	}

	/** Whether any is still to come. */
	hasObservables(): boolean {
		return this.tokens.slice(this.next).some(({ kind }) => kind === 'letter');
	}

	hasRelation(): boolean {
		return this.tokens.some(({ kind, text }) => text === '=' || kind === 'relation');
	}

	/** What `read` returns; where that is null, nothing has been taken. */
	attempt<T>(read: () => T | null): T | null {
		const start = this.next;
		const found = read();
		if (found === null) this.next = start;
		return found;
	}

	/** `<A0 B0>=2` closes the bracket first: its `>=` is a `>` and a `=`. */
	splitRelation(): void {
		const token = this.peek();
		if (token.text !== '>=') return;
		const symbol = { ...token, kind: 'symbol' } as const;
		this.tokens.splice(this.next, 1, { ...symbol, text: '>' }, { ...symbol, text: '=' });
	}
}

/** `0`, `_0`, `_{0}`: an index of one party. @throws NotationError for `_{01}`, the inputs of two. */
export function readSubscript(reader: TokenReader, letter: string): number | null {
	return reader.attempt(() => {
		const marked = reader.accept('_');
		const braced = marked && reader.accept('{');
		const { kind, text, position } = reader.take();
		const closes = !braced || reader.accept('}');
		if (kind !== 'number' || !/^\d+$/.test(text) || !closes) return null;
		if (/^0\d/.test(text))
			throw new NotationError(
				`${letter}${text} is no input of party ${letter}`,
				position,
				'Write a correlator as <A0 B1> or E(0,1).'
			);
		return Number(text);
	});
}
