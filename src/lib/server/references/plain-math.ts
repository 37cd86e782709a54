/** Commands that titles use and Citation.js leaves as they are, as the characters they print. */
const SYMBOLS: Readonly<Record<string, string>> = {
	times: '×',
	cdot: '·',
	pm: '±',
	mp: '∓',
	le: '≤',
	leq: '≤',
	ge: '≥',
	geq: '≥',
	ne: '≠',
	neq: '≠',
	approx: '≈',
	sim: '∼',
	to: '→',
	rightarrow: '→',
	infty: '∞',
	otimes: '⊗',
	oplus: '⊕',
	in: '∈',
	subset: '⊂',
	langle: '⟨',
	rangle: '⟩',
	ldots: '…',
	dots: '…',
	ell: 'ℓ',
	hbar: 'ħ',
	dagger: '†'
};

const WORDS_AROUND = /\\(?:mathrm|mathcal|mathbb|mathbf|mathsf|text|textrm|operatorname)\s*/g;

/** A part in front of which or over which an operator stands: bare when it is one piece. */
const piece = (text: string) => (/^[\p{L}\d.√]+$/u.test(text) ? text : `(${text})`);

const digits = (text: string, alphabet: string) =>
	[...text].map((digit) => alphabet[Number(digit)] ?? digit).join('');

/**
 * A short formula in a title as plain text: `\sqrt2` is `√2`, `\frac{1}{2}` is `1/2`. What has no
 * plain form is left for Citation.js, which knows Greek letters and further powers and indices.
 */
export function plainMath(formula: string): string {
	return formula
		.replace(/\\(?:left|right)(?![a-zA-Z])/g, '')
		.replace(WORDS_AROUND, '')
		.replace(
			/\\sqrt\s*(?:\{([^{}]+)\}|([a-zA-Z\d]))/g,
			(_, braced?: string, single?: string) => `√${piece(braced ?? single ?? '')}`
		)
		.replace(
			/\\[dt]?frac\s*(?:\{([^{}]+)\}|(\d))\s*(?:\{([^{}]+)\}|(\d))/g,
			(_, a?: string, b?: string, c?: string, d?: string) =>
				`${piece(a ?? b ?? '')}/${piece(c ?? d ?? '')}`
		)
		.replace(/\\([a-zA-Z]+)\s*/g, (whole, name: string) => SYMBOLS[name] ?? whole)
		.replace(/\^\s*(?:\{(\d+)\}|(\d))/g, (_, many?: string, one?: string) =>
			digits(many ?? one ?? '', '⁰¹²³⁴⁵⁶⁷⁸⁹')
		)
		.replace(/_\s*(?:\{(\d+)\}|(\d))/g, (_, many?: string, one?: string) =>
			digits(many ?? one ?? '', '₀₁₂₃₄₅₆₇₈₉')
		);
}
