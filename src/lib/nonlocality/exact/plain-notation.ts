import { NotationError } from './notation-error';

/** A text rewritten in plain ASCII, and where each of its characters came from. */
export interface PlainNotation {
	readonly text: string;
	/** positions[i]: index in the original of what made character i; one past the end included. */
	readonly positions: readonly number[];
}

const CHARACTERS: Readonly<Record<string, string>> = {
	'\u2212': '-',
	'\u2013': '-',
	'\u2014': '-',
	'\u2010': '-',
	'\u2011': '-',
	'\ufe63': '-',
	'\uff0d': '-',
	'\u00d7': '*',
	'\u00b7': '*',
	'\u22c5': '*',
	'\u2219': '*',
	'\u2217': '*',
	'\u2297': '*',
	'\u00f7': '/',
	'\u2044': '/',
	'\u2215': '/',
	'\u03c0': ' pi ',
	'\u00bd': '(1/2)',
	'\u00bc': '(1/4)',
	'\u00be': '(3/4)',
	'\u2153': '(1/3)',
	'\u2154': '(2/3)',
	'\u00b2': '^2',
	'\u00b3': '^3',
	'\u27e8': '<',
	'\u27e9': '>',
	'\u2329': '<',
	'\u232a': '>',
	'\u3008': '<',
	'\u3009': '>',
	'\u2264': '<=',
	'\u2265': '>=',
	'\u2a7d': '<=',
	'\u2a7e': '>=',
	'\u2223': '|',
	'\uff5c': '|',
	'\u00a0': ' ',
	'\u2002': ' ',
	'\u2003': ' ',
	'\u2009': ' ',
	'\u200a': ' ',
	'\u202f': ' ',
	'\u2061': ' ',
	'\u2062': ' ',
	'\u200b': ' ',
	'\ufeff': ' ',
	'\t': ' ',
	'\n': ' ',
	'\r': ' ',
	'~': ' ',
	$: ' ',
	'&': ' '
};

/** Commands that stand for a symbol. */
const SYMBOLS: Readonly<Record<string, string>> = {
	cdot: '*',
	times: '*',
	otimes: '*',
	ast: '*',
	div: '/',
	pi: ' pi ',
	cos: ' cos',
	sin: ' sin',
	langle: '<',
	rangle: '>',
	lt: '<',
	gt: '>',
	le: '<=',
	leq: '<=',
	leqslant: '<=',
	ge: '>=',
	geq: '>=',
	geqslant: '>=',
	mid: '|',
	vert: '|',
	lvert: '|',
	rvert: '|',
	lbrace: '(',
	rbrace: ')',
	Pr: ' P'
};

/** Commands that only change how something looks. */
const IGNORED = new Set([
	'left',
	'right',
	'middle',
	'big',
	'Big',
	'bigg',
	'Bigg',
	'bigl',
	'bigr',
	'Bigl',
	'Bigr',
	'biggl',
	'biggr',
	'Biggl',
	'Biggr',
	'quad',
	'qquad',
	'displaystyle',
	'textstyle',
	'nonumber',
	'hat',
	'widehat',
	'mathrm',
	'mathbf',
	'mathsf',
	'mathit',
	'mathcal',
	'boldsymbol',
	'operatorname',
	'text',
	'limits',
	'thinspace'
]);

const FRACTIONS = new Set(['frac', 'tfrac', 'dfrac']);
const MAXIMUM_NESTING = 50;

/**
 * Rewrites pasted LaTeX and Unicode mathematics as plain text: `\frac{1}{2}` becomes `((1)/(2))`,
 * `\sqrt{2}` `sqrt(2)`, a Unicode minus `-`, `A₁` `A_1`. Plain text comes out unchanged.
 * @throws NotationError for an unknown command or an unclosed brace, with its position.
 */
export function plainNotation(source: string): PlainNotation {
	return new Rewriter(source).run();
}

class Rewriter {
	private at = 0;
	private depth = 0;
	private out = '';
	private readonly positions: number[] = [];

	constructor(private readonly source: string) {}

	run(): PlainNotation {
		while (this.at < this.source.length) this.step();
		return { text: this.out, positions: [...this.positions, this.source.length] };
	}

	private emit(text: string, position: number): void {
		this.out += text;
		for (let i = 0; i < text.length; i++) this.positions.push(position);
	}

	private step(): void {
		const start = this.at;
		const character = this.source.charAt(start);
		if (character === '\\') return this.command();
		this.at++;
		const code = character.charCodeAt(0);
		if (code >= 0x2080 && code <= 0x2089) {
			const follows = /[\u2080-\u2089]/.test(this.source.charAt(start - 1));
			return this.emit(`${follows ? '' : '_'}${code - 0x2080}`, start);
		}
		if (character === '\u221a') return this.root(start);
		this.emit(CHARACTERS[character] ?? character, start);
	}

	private command(): void {
		const start = this.at;
		const name = /^[A-Za-z]+/.exec(this.source.slice(start + 1, start + 30))?.[0] ?? '';
		if (name === '') {
			const next = this.source.charAt(start + 1);
			if (!',;:! \\|{}'.includes(next) || next === '')
				throw new NotationError('a stray backslash', start, 'Leave it out.');
			this.at += 2;
			return this.emit({ '|': '|', '{': '(', '}': ')' }[next] ?? ' ', start);
		}
		this.at += 1 + name.length;
		const symbol = Object.hasOwn(SYMBOLS, name) ? SYMBOLS[name] : undefined;
		if (symbol !== undefined) return this.emit(symbol, start);
		if (IGNORED.has(name)) {
			if (this.source.charAt(this.at) === '.') this.at++; // \left.
			return this.emit(' ', start);
		}
		if (name === 'sqrt') return this.root(start);
		if (FRACTIONS.has(name)) {
			this.emit('((', start);
			this.argument(start);
			this.emit(')/(', start);
			this.argument(start);
			return this.emit('))', start);
		}
		throw new NotationError(
			`the command \\${name} is not understood`,
			start,
			'Write the formula with +, -, *, /, parentheses, \\frac, \\sqrt and indices only.'
		);
	}

	private root(start: number): void {
		this.skipSpaces();
		if (this.source.charAt(this.at) === '[')
			throw new NotationError('only square roots are understood', start, 'Write sqrt(...).');
		this.emit(' sqrt(', start);
		this.argument(start);
		this.emit(')', start);
	}

	/** What a command applies to: a braced or bracketed group, a command, a number's digit or digits. */
	private argument(command: number): void {
		this.skipSpaces();
		const start = this.at;
		const opening = this.source.charAt(start);
		const closing = { '{': '}', '(': ')' }[opening];
		if (closing === undefined) {
			if (opening === '') throw new NotationError('the formula ends too early', command, null);
			// \frac12 takes one digit each; a bare root sign takes the whole number after it.
			const digits = this.source.charAt(command) === '\\' ? /^\d/ : /^[\d.]+/;
			const number = digits.exec(this.source.slice(start))?.[0];
			if (number === undefined) return this.step();
			this.at += number.length;
			for (let i = 0; i < number.length; i++) this.emit(number.charAt(i), start + i);
			return;
		}
		if (++this.depth > MAXIMUM_NESTING)
			throw new NotationError(`more than ${MAXIMUM_NESTING} levels of nesting`, start, null);
		this.at++;
		let open = 1;
		for (;;) {
			const next = this.source.charAt(this.at);
			if (next === '')
				throw new NotationError(`this ${opening} is never closed`, start, `Add a ${closing}.`);
			if (next === opening) open++;
			if (next === closing && --open === 0) break;
			this.step();
		}
		this.at++;
		this.depth--;
	}

	private skipSpaces(): void {
		while (/\s/.test(this.source.charAt(this.at))) this.at++;
	}
}
