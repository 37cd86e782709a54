import { NotationError } from '../exact/notation-error';
import { plainNotation } from '../exact/plain-notation';

/** Sizes past which an expression is refused before any work is done on it. */
export const EXPRESSION_LIMITS = {
	characters: 4_000,
	/** Terms after multiplying out, an observable counted as one. */
	terms: 2_000,
	/** Probabilities after writing observables out. */
	probabilities: 20_000,
	parties: 6,
	inputs: 64,
	outputs: 20,
	nesting: 50
} as const;

export interface Token {
	readonly kind: 'number' | 'letter' | 'function' | 'symbol' | 'relation' | 'end';
	readonly text: string;
	/** Zero-based position in the text as it was given. */
	readonly position: number;
	/** False when it follows the token before it directly. */
	readonly spaced: boolean;
}

const PATTERNS: readonly (readonly [Token['kind'], RegExp])[] = [
	['relation', /<=|>=|=<|=>/y],
	['function', /sqrt|cos|sin|pi/y],
	['letter', /Pr|[A-Za-z]/y],
	// An exponent takes a lower-case e, so that 2E(0,1) is twice a correlator.
	['number', /\d+(?:\.\d+)?(?:e[+-]?\d+)?|\.\d+/y],
	['symbol', /[-+*/^()[\]{}<>|,_=]/y]
];

/** @throws NotationError at the first character that has no meaning. */
export function tokenize(source: string): Token[] {
	const plain = plainNotation(source);
	// `\hat{A}_0` comes as `{A}_0`, and there is `a{=}0`: these braces say nothing.
	const text = plain.text.replace(/\{(\s*(?:Pr|[A-Za-z]|[-+=<>,|]|)\s*)\}/g, ' $1 ');
	const at = (index: number) => plain.positions[index] ?? source.length;
	const tokens: Token[] = [];
	let index = 0;
	let spaced = true;
	while (index < text.length) {
		if (text[index] === ' ') {
			index++;
			spaced = true;
			continue;
		}
		const rest = text.slice(index).trim();
		// The punctuation of the sentence it was copied from, and the dots of a bound's digits.
		if (rest === '.' || rest === ',' || rest === ';') break;
		if (/^\.\.\.[.,;]?$/.test(rest) && isRelation(tokens.at(-2))) break;
		if (/^\d+(?:\.\d+)?E\d/.test(rest)) throw unclearExponent(rest, at(index));
		const token = matchAt(text, index);
		if (rest.startsWith('...'))
			throw new NotationError('an ellipsis stands for terms', at(index), 'Write every term.');
		if (!token) throw unknownCharacter(text.charAt(index), at(index));
		tokens.push({ ...token, position: at(index), spaced });
		index += token.text.length;
		spaced = false;
	}
	return [...tokens, { kind: 'end', text: '', position: source.length, spaced: true }];
}

/** Not `<` and `>`, which are brackets as well. */
const isRelation = (token?: Token) => token?.kind === 'relation' || token?.text === '=';

function matchAt(text: string, index: number): Pick<Token, 'kind' | 'text'> | null {
	for (const [kind, pattern] of PATTERNS) {
		pattern.lastIndex = index;
		const match = pattern.exec(text);
		if (match) return { kind, text: match[0] };
	}
	return null;
}

/** `2E1`: the exponent of a number takes a lower-case e, and E is a party. */
function unclearExponent(rest: string, position: number): NotationError {
	const [, before = '', after = ''] = /^([\d.]+)E(\d+)/.exec(rest) ?? [];
	return new NotationError(
		`it is not clear whether ${before}E${after} is one number`,
		position,
		`Write ${before}e${after} for the number, ${before} E${after} for the observable of party E.`
	);
}

function unknownCharacter(character: string, position: number): NotationError {
	if (character === ':' || character === ';')
		return new NotationError(
			`${character} has no meaning here`,
			position,
			'Enter the formula alone.'
		);
	if (/['`\u2018\u2019\u2032\u2033]/.test(character))
		return new NotationError(
			'primes are not understood',
			position,
			'Write A0 and A1 for A and A\u2032.'
		);
	if (/[\u03a3\u2211\u220f]/.test(character))
		return new NotationError('sums have to be written out', position, 'Write every term.');
	if (character === '\u2260')
		return new NotationError(
			'a probability that two outputs differ is a sum',
			position,
			'Write it out: P(0,1|0,0) + P(1,0|0,0).'
		);
	if (character === '.')
		return new NotationError(
			'a stray point',
			position,
			'Write a decimal as 0.5, a product as a*b.'
		);
	const shown = /^[!-~]$/.test(character) ? character : 'this character';
	return new NotationError(`${shown} has no meaning here`, position);
}
