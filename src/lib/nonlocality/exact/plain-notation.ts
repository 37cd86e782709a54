import { NotationError } from './notation-error';
import {
	ADVICE,
	BRACKETS,
	CHARACTERS,
	COLUMNED,
	DROPPED,
	ENVIRONMENTS,
	IGNORED,
	STACKED,
	SYMBOLS,
	VULGAR_FRACTIONS
} from './notation-symbols';

/** A text rewritten in plain ASCII, and where each of its characters came from. */
export interface PlainNotation {
	readonly text: string;
	/** positions[i]: index in the original of what made character i; one past the end included. */
	readonly positions: readonly number[];
}

const FRACTIONS = new Set(['frac', 'tfrac', 'dfrac', 'cfrac', 'nicefrac', 'sfrac']);
const MAXIMUM_NESTING = 50;

/** An index of letters. */
const STATE = /^\s*_\s*(?:\{[^{}\d]{1,40}\}|\\[A-Za-z]{1,20}|[A-Za-z])/;

const FUNCTION = /^(?:cos|sin)$/;
const POWER_OF_FUNCTION = /^\s*(?:\^\s*(?:\{\s*(\d)\s*\}|(\d))|([\u00b2\u00b3]))\s*/;
/** What may follow a function without doubt about where its argument ends. */
const OPENS_ARGUMENT = /^\s*(?:\\left\s*)?(?=[({]|\\(?:[tdc]?|nice|s)frac(?![A-Za-z]))/;

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

	/** A space in front of a word keeps it apart from letters only: `1/2√2` stays unclear. */
	private emit(symbol: string, position: number): void {
		const apart = /^ [a-zA-Z(]/.test(symbol) && !/[A-Za-z]$/.test(this.out.slice(-1));
		const text = apart ? symbol.slice(1) : symbol;
		this.out += text;
		for (let i = 0; i < text.length; i++) this.positions.push(position);
	}

	private step(): void {
		const start = this.at;
		const character = this.source.charAt(start);
		if (character === '\\') return this.command();
		const word = FUNCTION.exec(this.source.slice(start, start + 3))?.[0];
		if (word && !/[A-Za-z]/.test(this.source.charAt(start - 1))) {
			this.at += word.length;
			return this.apply(word, word, start);
		}
		const point = this.source.codePointAt(start) ?? 0;
		const whole = String.fromCodePoint(point);
		this.at += whole.length;
		const vulgar = VULGAR_FRACTIONS[character];
		if (vulgar !== undefined) {
			if (/\d\s*$/.test(this.source.slice(0, start)))
				throw new NotationError(
					'a mixed number',
					start,
					'Write it as one fraction, for instance 3/2.'
				);
			return this.emit(vulgar, start);
		}
		const code = character.charCodeAt(0);
		if (code >= 0x2080 && code <= 0x2089) {
			const follows = /[\u2080-\u2089]/.test(this.source.charAt(start - 1));
			return this.emit(`${follows ? '' : '_'}${code - 0x2080}`, start);
		}
		if (character === '\u221a') return this.root(start);
		if (character === '\u27e9' || character === '\u3009') return this.closeBracket(start);
		this.emit(CHARACTERS[character] ?? plainLetter(whole), start);
	}

	private command(): void {
		const start = this.at;
		const name = /^[A-Za-z]+/.exec(this.source.slice(start + 1, start + 30))?.[0] ?? '';
		if (name === '') {
			const next = this.source.charAt(start + 1);
			if (!',;:! \\|{}()[]'.includes(next) || next === '')
				throw new NotationError('a stray backslash', start, 'Leave it out.');
			this.at += 2;
			return this.emit({ '|': '|', '{': '(', '}': ')' }[next] ?? ' ', start);
		}
		this.at += 1 + name.length;
		const symbol = Object.hasOwn(SYMBOLS, name) ? SYMBOLS[name] : undefined;
		if (symbol === '>' && name === 'rangle') return this.closeBracket(start);
		if (symbol !== undefined) return this.emit(symbol, start);
		if (IGNORED.has(name)) {
			if (this.source.charAt(this.at) === '.') this.at++; // \left.
			return this.emit(' ', start);
		}
		if (name === 'sqrt') return this.root(start);
		if (FUNCTION.test(name)) return this.apply(name, ` ${name}`, start);
		if (DROPPED.has(name)) {
			this.dropArgument(start);
			return;
		}
		if (STACKED.has(name)) {
			this.dropArgument(start);
			return this.argument(start);
		}
		if (name === 'begin' || name === 'end') {
			const environment = this.dropArgument(start).replace(/\*$/, '');
			if (name === 'begin' && COLUMNED.has(environment)) this.dropArgument(start);
			if (ENVIRONMENTS.has(environment)) return;
			throw new NotationError(
				`\\${name}{${environment.slice(0, 20)}} is not understood`,
				start,
				'Enter the formula alone.'
			);
		}
		if (BRACKETS.has(name)) {
			this.emit('<', start);
			this.argument(start);
			return this.closeBracket(start);
		}
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
			(Object.hasOwn(ADVICE, name) ? ADVICE[name] : undefined) ??
				'Write the formula with +, -, *, /, parentheses, \\frac, \\sqrt and indices only.'
		);
	}

	/** `\\rangle_\\rho`, `\\rangle_{Q}`: the state or theory says nothing of the functional. */
	private closeBracket(start: number): void {
		this.emit('>', start);
		const script = STATE.exec(this.source.slice(this.at, this.at + 100));
		this.at += script?.[0].length ?? 0;
	}

	/** `\cos^2(\pi/8)`, `\cos\frac{\pi}{8}`: as ((cos(pi/8))^2), cos((pi)/(8)). */
	private apply(name: string, bare: string, start: number): void {
		const rest = this.source.slice(this.at);
		const power = POWER_OF_FUNCTION.exec(rest);
		const exponent = power?.[1] ?? power?.[2] ?? (power && (power[3] === '\u00b2' ? '2' : '3'));
		const opens = OPENS_ARGUMENT.exec(rest.slice(power?.[0].length ?? 0));
		if (!opens) {
			if (!power) return this.emit(bare, start);
			throw new NotationError(
				`${name} needs parentheses`,
				start,
				`Write (${name}(...))^${exponent}.`
			);
		}
		if (!power && bare === name) return this.emit(bare, start);
		this.at += (power?.[0].length ?? 0) + opens[0].length;
		this.emit(power ? ` (${name}(` : ` ${name}(`, start);
		this.argument(start);
		this.emit(power ? `)^${exponent})` : ')', start);
	}

	/** The braces after a command, which say nothing here; what was in them. */
	private dropArgument(command: number): string {
		this.skipSpaces();
		const group = /^\{((?:[^{}]|\{[^{}]*\})*)\}/.exec(this.source.slice(this.at));
		if (!group)
			throw new NotationError(
				'this command needs its braces',
				command,
				'Leave it out, or enter the formula alone.'
			);
		this.at += group[0].length;
		return group[1] ?? '';
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
			if (number === undefined) {
				this.descend(start);
				this.step();
				this.depth--;
				return;
			}
			this.at += number.length;
			for (let i = 0; i < number.length; i++) this.emit(number.charAt(i), start + i);
			return;
		}
		this.descend(start);
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

	private descend(position: number): void {
		if (++this.depth > MAXIMUM_NESTING)
			throw new NotationError(`more than ${MAXIMUM_NESTING} levels of nesting`, position, null);
	}

	private skipSpaces(): void {
		while (/\s/.test(this.source.charAt(this.at))) this.at++;
	}
}

/** Letters and digits in a font of their own, as copied from a PDF, in the usual one. */
function plainLetter(character: string): string {
	const plain = character > '~' ? character.normalize('NFKC') : character;
	return /^[A-Za-z\d]$/.test(plain) ? plain : character;
}
