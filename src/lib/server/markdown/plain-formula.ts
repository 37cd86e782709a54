import { plainMath } from '../references/plain-math';

const SMALL = 'αβγδεζηθικλμνξπρστυφχψω';
const SMALL_NAMES =
	'alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi pi rho sigma tau upsilon phi chi psi omega';
const LARGE = 'ΓΔΘΛΞΠΣΥΦΨΩ';
const LARGE_NAMES = 'Gamma Delta Theta Lambda Xi Pi Sigma Upsilon Phi Psi Omega';

const named = (names: string, letters: string) =>
	names.split(' ').map((name, index) => [name, letters[index] ?? ''] as const);

/** Beside the signs that titles of papers use. */
const LETTERS: ReadonlyMap<string, string> = new Map([
	...named(SMALL_NAMES, SMALL),
	...named(LARGE_NAMES, LARGE),
	['varepsilon', 'ε'],
	['varphi', 'φ'],
	['sum', '∑'],
	['prod', '∏'],
	['max', 'max'],
	['min', 'min'],
	['cos', 'cos'],
	['sin', 'sin'],
	['log', 'log'],
	['quad', ' ']
]);

/** `\frac{\alpha}{2}` needs its letters before its fraction is read. */
const withLetters = (formula: string) =>
	formula.replace(/\\([a-zA-Z]+)\s*/g, (whole, name: string) => LETTERS.get(name) ?? whole);

/**
 * A formula as plain text: `\sqrt{2}/4` is `√2/4`, `\langle A_0 B_1\rangle` is `⟨A₀ B₁⟩`. One with a
 * command that has no plain form is left as it was typed, since half of a formula says something
 * else.
 */
export function plainFormula(formula: string): string {
	const plain = plainMath(withLetters(formula.replace(/\\[,;:! ]/g, ' ')))
		.replace(/([_^])\{([\p{L}\d])\}/gu, '$1$2')
		.replace(/([_^])\{([^{}\\]+)\}/g, '$1($2)')
		.replace(/\\([{}%$&#])/g, '$1')
		.replace(/\s+(?=⟩)/g, '');
	return plain.includes('\\') ? formula.trim() : plain.replace(/\s+/g, ' ').trim();
}
