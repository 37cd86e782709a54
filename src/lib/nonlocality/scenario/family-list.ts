/** The named families: what each is, its parameter, its known values and where it was published. */

export interface FamilyParameter {
	readonly key: 'alpha' | 'n' | 'd' | 'matrix';
	readonly label: string;
	readonly kind: 'integer' | 'number' | 'matrix';
	/** Bounds of the value; of the rows and columns for a matrix. */
	readonly minimum: number;
	readonly maximum: number;
	/** What a form starts with. */
	readonly initial: string;
}

export interface FamilyInfo {
	readonly name: FamilyName;
	/** Plain text. */
	readonly title: string;
	readonly parameter: FamilyParameter | null;
	/** Which of the conventions in use this is. */
	readonly note: string;
	readonly source: string;
	/** Known maxima as formulas in the parameter; null where none is known in closed form. */
	readonly known: {
		readonly local: string | null;
		readonly quantum: string | null;
		readonly noSignalling: string | null;
	};
	readonly latex: (parameter: string) => string;
}

export const FAMILY_NAMES = [
	'chsh',
	'tilted-chsh',
	'chained',
	'i3322',
	'cglmp',
	'elegant',
	'mermin',
	'svetlichny',
	'gyni',
	'xor-game',
	'magic-square'
] as const;
export type FamilyName = (typeof FAMILY_NAMES)[number];

const CHSH_LATEX = 'A_0B_0+A_0B_1+A_1B_0-A_1B_1';

const integer = (
	key: 'n' | 'd',
	label: string,
	minimum: number,
	maximum: number,
	initial: number
): FamilyParameter => ({ key, label, kind: 'integer', minimum, maximum, initial: String(initial) });

export const FAMILIES: readonly FamilyInfo[] = [
	{
		name: 'chsh',
		title: 'CHSH',
		parameter: null,
		note: 'A0 B0 + A0 B1 + A1 B0 - A1 B1; equal to 4 CH + 2.',
		source: 'Clauser, Horne, Shimony, Holt, Phys. Rev. Lett. 23, 880 (1969)',
		known: { local: '2', quantum: '2*sqrt(2)', noSignalling: '4' },
		latex: () => CHSH_LATEX
	},
	{
		name: 'tilted-chsh',
		title: 'Tilted CHSH',
		parameter: {
			key: 'alpha',
			label: 'Tilt \u03b1',
			kind: 'number',
			minimum: 0,
			maximum: 2,
			initial: '1/2'
		},
		note: 'The tilt is on A0: \u03b1 A0 + CHSH.',
		source: 'Ac\u00edn, Massar, Pironio, Phys. Rev. Lett. 108, 100402 (2012)',
		known: { local: '2+alpha', quantum: 'sqrt(8+2*alpha^2)', noSignalling: '4' },
		latex: (alpha) => `${/^\d+(\.\d+)?$/.test(alpha) ? alpha : `(${alpha})`}\\,A_0+${CHSH_LATEX}`
	},
	{
		name: 'chained',
		title: 'Chained',
		parameter: integer('n', 'Inputs per party n', 2, 60, 3),
		note: 'n = 2 is CHSH up to a relabelling.',
		source: 'Braunstein, Caves, Ann. Phys. 202, 22 (1990)',
		known: { local: '2*n-2', quantum: '2*n*cos(pi/(2*n))', noSignalling: '2*n' },
		latex: (n) =>
			`\\sum_{i=0}^{${Number(n) - 1}}A_iB_i+\\sum_{i=0}^{${Number(n) - 2}}A_{i+1}B_i-A_0B_{${Number(n) - 1}}`
	},
	{
		name: 'i3322',
		title: 'I3322',
		parameter: null,
		note: 'Local maximum 0, in probabilities; with correlators, 4 I + 4.',
		source: 'Collins, Gisin, J. Phys. A 37, 1775 (2004)',
		known: { local: '0', quantum: null, noSignalling: '1' },
		latex: () => 'I_{3322}'
	},
	{
		name: 'cglmp',
		title: 'CGLMP',
		parameter: integer('d', 'Outputs d', 2, 12, 3),
		note: 'Normalised to local maximum 2, with P(X = Y + k) = \u2211 P(X = j + k mod d, Y = j).',
		source: 'Collins, Gisin, Linden, Massar, Popescu, Phys. Rev. Lett. 88, 040404 (2002)',
		known: { local: '2', quantum: null, noSignalling: '4' },
		latex: (d) => `I_{${d}}`
	},
	{
		name: 'elegant',
		title: 'Elegant',
		parameter: null,
		note: 'Three inputs for party A, four for B.',
		source: 'Gisin, arXiv:quant-ph/0702021 (2007)',
		known: { local: '6', quantum: '4*sqrt(3)', noSignalling: '12' },
		latex: () => 'A_0(B_0+B_1-B_2-B_3)+A_1(B_0-B_1+B_2-B_3)+A_2(B_0-B_1-B_2+B_3)'
	},
	{
		name: 'mermin',
		title: 'Mermin',
		parameter: integer('n', 'Parties n', 3, 6, 3),
		note: 'The original form, the real part of a product; not the recursive one.',
		source: 'Mermin, Phys. Rev. Lett. 65, 1838 (1990)',
		known: { local: '2^floor(n/2)', quantum: '2^(n-1)', noSignalling: '2^(n-1)' },
		latex: (n) => `\\mathrm{Re}\\prod_{p=1}^{${n}}\\left(A^{(p)}_0+i\\,A^{(p)}_1\\right)`
	},
	{
		name: 'svetlichny',
		title: 'Svetlichny',
		parameter: integer('n', 'Parties n', 2, 6, 3),
		note: 'Its hybrid bound 2^(n-1) is another quantity than the local maximum.',
		source: 'Svetlichny, Phys. Rev. D 35, 3066 (1987)',
		known: { local: '2^ceil(n/2)', quantum: '2^(n-1)*sqrt(2)', noSignalling: '2^n' },
		latex: (n) =>
			`\\sum_{x\\in\\{0,1\\}^{${n}}}(-1)^{\\lfloor |x|/2\\rfloor}\\prod_{p=1}^{${n}}A^{(p)}_{x_p}`
	},
	{
		name: 'gyni',
		title: 'GYNI',
		parameter: integer('n', 'Parties n', 3, 5, 3),
		note: 'Guess your neighbour\u2019s input, as a winning probability under the parity promise; no-signalling maximum 1/3, 1/6, 1/11 for n = 3, 4, 5.',
		source:
			'Almeida, Bancal, Brunner, Ac\u00edn, Gisin, Pironio, Phys. Rev. Lett. 104, 230404 (2010)',
		known: { local: '2^-(n-1)', quantum: '2^-(n-1)', noSignalling: null },
		latex: (n) =>
			`2^{-${Number(n) - 1}}\\sum_{x}P(a_p=x_{p+1}\\text{ for all }p\\mid x),\\quad n=${n}`
	},
	{
		name: 'xor-game',
		title: 'XOR game',
		parameter: {
			key: 'matrix',
			label: 'Matrix M',
			kind: 'matrix',
			minimum: 1,
			maximum: 20,
			initial: '1/4 1/4\n1/4 -1/4'
		},
		note: 'Winning probability 1/2 + f/2 when the absolute values of M sum to 1.',
		source: 'Cleve, H\u00f8yer, Toner, Watrous, arXiv:quant-ph/0404076 (2004)',
		known: { local: null, quantum: null, noSignalling: null },
		latex: () => '\\sum_{x,y}M_{xy}A_xB_y'
	},
	{
		name: 'magic-square',
		title: 'Magic square',
		parameter: null,
		note: 'As a winning probability; rows have even parity, columns odd.',
		source: 'Mermin, Phys. Rev. Lett. 65, 3373 (1990); Peres, Phys. Lett. A 151, 107 (1990)',
		known: { local: '8/9', quantum: '1', noSignalling: '1' },
		latex: () => '\\frac{1}{9}\\sum_{x,y=0}^{2}P(a_y=b_x\\mid x,y)'
	}
];
