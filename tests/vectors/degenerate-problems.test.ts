/**
 * Problems at the edge of what makes sense, through the same reading and the same checks as any
 * other: a right result, or an error that says what is wrong. The values follow by hand from the
 * line above each.
 */
import { describe, expect, it } from 'vitest';
import { solve, verifyResult, type Control, type Result } from '../../src/lib/nonlocality';
import { ProblemError, ProblemLimitError, parseProblem } from '../../src/lib/schemas/problem';

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => undefined
};

const TWO = [
	[2, 2],
	[2, 2]
];

const EXACT = {
	local: { quantity: 'local' },
	'no-signalling': { quantity: 'no-signalling' },
	'local with constraints': {
		quantity: 'local',
		constraints: [{ terms: [[1, []]], relation: '<=', value: 2 }]
	},
	facet: { quantity: 'facet' }
} as const;

async function solved(problem: object): Promise<Result> {
	return solve(parseProblem({ seconds: 20, ...problem }), control);
}

/** Subject, its maximum (local and no-signalling alike), and whether it is a facet. */
const SUBJECTS: readonly [string, object, string, '0' | '1'][] = [
	['all zero', { outputs: TWO, terms: [] }, '0', '0'],
	['terms that cancel', { expression: 'A0 B0 - A0 B0 + 0 A1 B1', outputs: TWO }, '0', '0'],
	['a constant only', { outputs: TWO, terms: [['-7/3', []]] }, '-7/3', '0'],
	[
		'one input each: P(0,2) - P_B(2)/2, at most 1/2 at (0,2)',
		{
			outputs: [[2], [3]],
			terms: [
				[
					1,
					[
						[0, 0, 0],
						[1, 0, 2]
					]
				],
				['-1/2', [[1, 0, 2]]]
			]
		},
		'1/2',
		'0'
	],
	[
		'one party: 1 + 2 from its two inputs',
		{
			outputs: [[2, 3]],
			terms: [
				[1, [[0, 0, 0]]],
				[2, [[0, 1, 2]]],
				[-3, [[0, 1, 1]]]
			]
		},
		'3',
		'0'
	],
	[
		// P(1) <= 1, an end of the segment of all P(1)
		'one party with one input',
		{ outputs: [[2]], terms: [[1, [[0, 0, 1]]]] },
		'1',
		'1'
	],
	[
		// all weight of party 1's input 0 is on output 3: 1 + 1 with that output
		'an input with one meaningful output',
		{
			outputs: [
				[2, 2],
				[4, 2]
			],
			terms: [
				[
					1,
					[
						[0, 0, 0],
						[1, 0, 3]
					]
				],
				[
					1,
					[
						[0, 1, 1],
						[1, 0, 3]
					]
				],
				[
					-1,
					[
						[0, 1, 0],
						[1, 1, 0]
					]
				]
			]
		},
		'2',
		'0'
	]
];

describe.each(SUBJECTS)('%s', (_, subject, value, facet) => {
	it.each(Object.entries(EXACT))('%s', async (name, quantity) => {
		const result = await solved({ ...subject, ...quantity });
		const exact = name === 'facet' ? facet : value;
		expect(result).toMatchObject({ status: 'done', exact });
		expect(verifyResult(result)).toMatchObject({ checked: true, exact });
	});

	it('NPA level 1 with non-negative probabilities', async () => {
		const result = await solved({ ...subject, quantity: 'npa', level: 1, nonNegative: true });
		const [above, below = '1'] = value.split('/');
		const truth = Number(above) / Number(below);
		expect(verifyResult(result)).toMatchObject({ checked: true });
		if (result.status !== 'done') throw new Error(result.reason);
		expect(result.lower).toBeLessThanOrEqual(truth);
		expect(result.upper).toBeGreaterThanOrEqual(truth);
		expect((result.upper ?? 9) - (result.lower ?? 0)).toBeLessThan(2e-8);
	});
});

describe('hybrid maxima of nothing', () => {
	const three = [
		[2, 2],
		[2, 2],
		[2, 2]
	];
	it.each(['svetlichny', 'no-signalling'])('%s', async (model) => {
		for (const [terms, exact] of [
			[[], '0'],
			[[['5/3', []]], '5/3']
		] as const) {
			const result = await solved({ outputs: three, terms, quantity: 'hybrid', model });
			expect(verifyResult(result)).toMatchObject({ checked: true, exact });
		}
	});
});

describe('coefficients 1e-12 and 1e12 together', () => {
	// 1e12 at outputs 0,0 of inputs 0,0, and 1e-12 at outputs 0,1 of inputs 1,1: both at once
	const spread = {
		outputs: TWO,
		terms: [
			[
				1e12,
				[
					[0, 0, 0],
					[1, 0, 0]
				]
			],
			[
				1e-12,
				[
					[0, 1, 0],
					[1, 1, 1]
				]
			]
		]
	};
	const exact = '1000000000000000000000001/1000000000000';

	it('local: exact, also with constraints', async () => {
		for (const name of ['local', 'local with constraints'] as const) {
			const result = await solved({ ...spread, ...EXACT[name] });
			expect(result).toMatchObject({ status: 'done', exact });
			expect(verifyResult(result)).toMatchObject({ checked: true, exact });
		}
	});

	it('no-signalling and NPA: enclosed', async () => {
		for (const quantity of [{ quantity: 'no-signalling' }, { quantity: 'npa', level: '1+AB' }]) {
			const result = await solved({ ...spread, ...quantity });
			expect(verifyResult(result)).toMatchObject({ checked: true });
			if (result.status !== 'done') throw new Error(result.reason);
			expect(result.lower).toBeLessThanOrEqual(1e12);
			expect(result.upper).toBeGreaterThan(1e12);
			expect((result.upper ?? 0) / (result.lower ?? 1) - 1).toBeLessThan(1e-9);
		}
	});

	it('600 digits apart: exact, or an error that says so', async () => {
		const [[, first], [, second]] = spread.terms as [[number, unknown], [number, unknown]];
		const wide = {
			outputs: TWO,
			terms: [
				['1e300', first],
				['1e-300', second]
			]
		};
		const local = await solved({ ...wide, ...EXACT.local });
		expect(verifyResult(local)).toMatchObject({
			checked: true,
			exact: `1${'0'.repeat(599)}1/1${'0'.repeat(300)}`
		});
		for (const name of ['no-signalling', 'local with constraints'] as const)
			expect(await solved({ ...wide, ...EXACT[name] })).toMatchObject({
				status: 'failed',
				reason: expect.stringContaining('too far apart')
			});
	});
});

describe('what is no problem names its field', () => {
	const refusal = (problem: object): unknown => {
		try {
			parseProblem(problem);
		} catch (error) {
			return error;
		}
		return null;
	};

	it.each([
		[{ outputs: TWO, terms: [['0/0', []]] }, 'terms[0][0]', /division by zero/],
		[{ expression: '0/0 A0 B0' }, 'expression', /division by zero/],
		[{ outputs: TWO, terms: [['1e999', []]] }, 'terms[0][0]', /exponent|too large|large/i],
		[{ outputs: TWO, terms: [['9^9^9', []]] }, 'terms[0][0]', /exponent/]
	])('%j', (subject, field, message) => {
		for (const quantity of Object.values(EXACT)) {
			const error = refusal({ ...subject, ...quantity });
			expect(error).toBeInstanceOf(ProblemError);
			expect(error).toMatchObject({ field });
			expect(String(error)).toMatch(message);
		}
	});

	it('a huge expression is refused with the figure', () => {
		const expression = Array.from({ length: 3000 }, (_, i) => `A${i % 2} B${i % 3}`).join(' + ');
		const error = refusal({ expression, quantity: 'local' });
		expect(error).toBeInstanceOf(ProblemLimitError);
		expect(String(error)).toMatch(/4,000 characters, this one 2\d,\d{3}/);
	});
});
