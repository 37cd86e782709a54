/** What pasted LaTeX and Unicode mathematics stands for in plain ASCII. */
/** Characters that stand for others. */
export const CHARACTERS: Readonly<Record<string, string>> = {
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
	'\u2272': '<=',
	'\u2273': '>=',
	'\u2248': '=',
	'\u2243': '=',
	'\u2026': '...',
	'\u22ef': '...',
	'\u2223': '|',
	// Greek and Cyrillic letters that look like those of parties.
	'\u0391': 'A',
	'\u0392': 'B',
	'\u0395': 'E',
	'\u03a1': 'P',
	'\u0410': 'A',
	'\u0412': 'B',
	'\u0421': 'C',
	'\u0415': 'E',
	'\u0420': 'P',
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
export const SYMBOLS: Readonly<Record<string, string>> = {
	cdot: '*',
	times: '*',
	otimes: '*',
	ast: '*',
	div: '/',
	pi: ' pi ',
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
	lesssim: '<=',
	gtrsim: '>=',
	approx: '=',
	simeq: '=',
	dots: '...',
	ldots: '...',
	cdots: '...',
	mid: '|',
	vert: '|',
	lvert: '|',
	rvert: '|',
	lbrace: '(',
	rbrace: ')',
	Pr: ' P',
	prime: '\u2032',
	neq: '\u2260',
	ne: '\u2260'
};

/** Commands that only change how something looks. */
export const IGNORED = new Set([
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
	'ensuremath',
	'hat',
	'widehat',
	'mathbb',
	'mathrm',
	'mathbf',
	'mathsf',
	'mathit',
	'mathcal',
	'boldsymbol',
	'operatorname',
	'text',
	'textbf',
	'textit',
	'textrm',
	'rm',
	'bf',
	'it',
	'bm',
	'limits',
	'nolimits',
	'thinspace',
	'medspace',
	'thickspace',
	'negthinspace',
	'hfill',
	'notag',
	'bigm',
	'Bigm',
	'biggm',
	'Biggm',
	'scriptstyle',
	'tiny',
	'small',
	'footnotesize',
	'mathopen',
	'mathclose',
	'mathrel',
	'mathbin',
	'mathord',
	'mathscr',
	'mathfrak',
	'mathtt',
	'mathnormal',
	'textsf'
]);

/** Commands whose braces say nothing about the formula. */
export const DROPPED = new Set([
	'label',
	'tag',
	'hspace',
	'vspace',
	'color',
	'textcolor',
	'phantom',
	'hphantom',
	'vphantom',
	'cite',
	'ref',
	'eqref',
	'footnote'
]);

/** A relation with something written above or below it: `\overset{L}{\leq}`. */
export const STACKED = new Set(['overset', 'underset', 'stackrel']);

/** Expectation values: `\expval{A_0 B_0}`. */
export const BRACKETS = new Set(['braket', 'Braket', 'expval', 'ev']);

/** Displays that a formula may be pasted with. */
export const ENVIRONMENTS = new Set([
	'equation',
	'align',
	'aligned',
	'gather',
	'gathered',
	'multline',
	'split',
	'eqnarray',
	'displaymath',
	'math',
	'flalign',
	'subequations',
	'array',
	'alignat',
	'alignedat',
	'IEEEeqnarray'
]);

/** Those of them whose columns are described in braces of their own. */
export const COLUMNED = new Set(['array', 'alignat', 'alignedat', 'IEEEeqnarray']);

/** What to say of commands that people do write in a formula, and that can't be read. */
export const ADVICE: Readonly<Record<string, string>> = {
	...advise('Write every term, with numbers as inputs and outputs.', 'sum prod bigotimes Sigma'),
	...advise(
		'Leave the state out: write <A_0 B_0>.',
		'psi Psi phi Phi varphi rho varrho bra ket Tr tr'
	),
	...advise('Write the observables as A_0, B_1.', 'sigma openone mathbbm vec bar overline tilde'),
	...advise(
		'Put the number in its place.',
		'alpha beta gamma delta epsilon varepsilon eta theta vartheta kappa lambda mu nu xi tau chi omega Omega'
	)
};

function advise(advice: string, commands: string): Record<string, string> {
	return Object.fromEntries(commands.split(' ').map((command) => [command, advice]));
}

/** Numbers printed as one character. */
export const VULGAR_FRACTIONS: Readonly<Record<string, string>> = {
	'\u00bd': '(1/2)',
	'\u00bc': '(1/4)',
	'\u00be': '(3/4)',
	'\u2153': '(1/3)',
	'\u2154': '(2/3)'
};
