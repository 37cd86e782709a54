import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	collinsGisinForm,
	functionalOfTerms,
	makeFunctional,
	negateCoefficient,
	type Problem
} from '../nonlocality/notation';
import { ProblemError, ProblemLimitError, UnsolvedQuantityError, parseProblem } from './problem';

const chsh = { family: { name: 'chsh' } };
const local = (subject: object): Problem => parseProblem({ ...subject, quantity: 'local' });

function same(a: Problem, b: Problem): boolean {
	const f = functionalOfTerms(a.outputs, a.terms);
	const g = functionalOfTerms(b.outputs, b.terms);
	const negative = g.terms.map((t) => ({ ...t, coefficient: negateCoefficient(t.coefficient) }));
	const difference = makeFunctional(f.scenario, [...f.terms, ...negative]);
	return (
		JSON.stringify(a.outputs) === JSON.stringify(b.outputs) &&
		collinsGisinForm(difference).terms.length === 0
	);
}

function failure(json: unknown): unknown {
	try {
		parseProblem(json);
	} catch (error) {
		return error;
	}
	return null;
}

describe('subjects', () => {
	it.each([
		{ expression: 'A0 B0 + A0 B1 + A1 B0 - A1 B1' },
		{ expression: 'A1 B1 + A1 B2 + A2 B1 - A2 B2', indexBase: 1 },
		{
			correlators: [
				[0, 0, 0],
				[0, 1, 1],
				[0, '1', -1.0]
			]
		},
		{
			collinsGisin: [
				[2, -4, 0],
				[-4, 4, 4],
				[0, 4, -4]
			],
			outputs: [
				[2, 2],
				[2, 2]
			]
		},
		{
			family: {
				name: 'xor-game',
				matrix: [
					[1, 1],
					[1, -1]
				]
			}
		},
		{
			outputs: [
				[2, 2],
				[2, 2]
			],
			terms: [
				[2, []],
				[-4, [[0, 0, 0]]],
				['-4', [[1, 0, 0]]],
				[
					'4.0',
					[
						[0, 0, 0],
						[1, 0, 0]
					]
				],
				[
					4,
					[
						[0, 0, 0],
						[1, 1, 0]
					]
				],
				[
					'8/2',
					[
						[0, 1, 0],
						[1, 0, 0]
					]
				],
				[
					'-sqrt(16)',
					[
						[0, 1, 0],
						[1, 1, 0]
					]
				]
			]
		}
	])('reads CHSH from %j', (subject) => {
		expect(same(local(subject), local(chsh))).toBe(true);
	});

	it('reads full probabilities', () => {
		const entries: Record<string, number> = {};
		for (const [a, b, x, y] of [...Array(16).keys()].map((i) => [
			i & 1,
			(i >> 1) & 1,
			(i >> 2) & 1,
			i >> 3
		]))
			entries[`${a},${b}|${x},${y}`] =
				((a ?? 0) + (b ?? 0) + (x ?? 0) * (y ?? 0)) % 2 === 0 ? 1 : -1;
		expect(same(local({ probabilities: entries }), local(chsh))).toBe(true);
	});

	it('adds repeated events up and reads a JSON number as its shortest decimal', () => {
		const events = [[0, 0, 0]];
		const problem = local({
			outputs: [[2], [2]],
			terms: [
				[0.1, events],
				[0.2, events]
			]
		});
		expect(problem.terms).toEqual([['3/10', events]]);
	});

	it('keeps irrational coefficients as written, in one normal form', () => {
		const problem = local({
			outputs: [[2]],
			terms: [
				['2^(1/2)', []],
				['sqrt(8)', [[0, 0, 0]]]
			]
		});
		expect(problem.terms).toEqual([
			['sqrt(2)', []],
			['2*sqrt(2)', [[0, 0, 0]]]
		]);
	});
});

describe('quantities and defaults', () => {
	it('fills what is left out', () => {
		expect(parseProblem({ ...chsh, quantity: 'quantum' })).toMatchObject({
			format: 1,
			sense: 'max',
			constraints: [],
			seconds: 30,
			seed: 0,
			levels: null,
			dimensions: null,
			gap: 1e-8
		});
		expect(parseProblem({ ...chsh, quantity: 'npa', level: '1+AB' })).toMatchObject({
			level: '1+AB',
			nonNegative: false
		});
		expect(parseProblem({ ...chsh, quantity: 'see-saw', dimension: 3 })).toMatchObject({
			dimension: [3, 3],
			state: 'free'
		});
	});

	it('reads constraints in any notation', () => {
		const { constraints } = local({
			...chsh,
			constraints: [
				{
					terms: [
						[
							1,
							[
								[0, 0, 0],
								[1, 1, 1]
							]
						]
					],
					relation: '=',
					value: 0
				},
				{ expression: 'A0', relation: '<=', value: '1/2' }
			]
		});
		expect(constraints).toEqual([
			{
				terms: [
					[
						'1',
						[
							[0, 0, 0],
							[1, 1, 1]
						]
					]
				],
				relation: '=',
				value: '0'
			},
			{
				terms: [
					['1', [[0, 0, 0]]],
					['-1', [[0, 0, 1]]]
				],
				relation: '<=',
				value: '1/2'
			}
		]);
	});

	it('makes the boxes of the format', () => {
		const value = (box: object, subject: object = chsh) =>
			parseProblem({ ...subject, quantity: 'value', box });
		const isotropic = value({ family: 'isotropic', d: 2, E: '1/sqrt(2)' });
		expect(isotropic.quantity === 'value' && isotropic.box).toMatchObject({
			kind: 'table',
			probabilities: {
				'0,0|0,0': '1/4+1/8*sqrt(2)',
				'0,1|0,0': '1/4-1/8*sqrt(2)',
				'0,0|1,1': '1/4-1/8*sqrt(2)'
			}
		});
		const uniform = value({ family: 'uniform' }, { outputs: [[3], [2]], terms: [[1, []]] });
		expect(uniform.quantity === 'value' && uniform.box).toMatchObject({
			probabilities: { '2,1|0,0': '1/6' }
		});
		const fixed = value({
			family: 'deterministic',
			strategy: [
				[0, 1],
				[1, 1]
			]
		});
		expect(fixed.quantity === 'value' && fixed.box).toMatchObject({
			probabilities: { '0,1|0,0': '1', '1,1|1,0': '1', '0,0|0,0': '0' }
		});
		const up = [
			[
				[1, 0],
				[0, 0]
			],
			[
				[0, 0],
				[0, 0]
			]
		];
		const down = [
			[
				[0, 0],
				[0, 0]
			],
			[
				[0, 0],
				[1, 0]
			]
		];
		const quantum = value({
			family: 'quantum',
			state: [
				['1/sqrt(2)', 0],
				[0, 0],
				[0, 0],
				['1/sqrt(2)', 0]
			],
			measurements: [
				[
					[up, down],
					[up, down]
				],
				[
					[up, down],
					[up, down]
				]
			]
		});
		expect(
			quantum.quantity === 'value' &&
				quantum.box.kind === 'quantum' &&
				quantum.box.strategy.dimensions
		).toEqual([2, 2]);
	});

	it.each([
		'visibility',
		'efficiency',
		'information-causality',
		'information-causality-test',
		'guessing',
		'random-access-code'
	])('knows %s, which no solver serves yet', (quantity) => {
		expect(failure({ quantity })).toBeInstanceOf(UnsolvedQuantityError);
		expect(String(failure({ quantity }))).toContain('no solver for this quantity yet');
	});
});

describe('normal form', () => {
	const problems = [
		{ ...chsh, quantity: 'local', sense: 'min' },
		{
			family: { name: 'tilted-chsh', alpha: 'sqrt(2)/3' },
			quantity: 'quantum',
			levels: [1, '1+AB'],
			dimensions: [2],
			gap: 1e-6
		},
		{
			family: { name: 'mermin', n: 3 },
			quantity: 'npa',
			level: { perParty: 1 },
			nonNegative: true
		},
		{ family: { name: 'mermin', n: 3 }, quantity: 'hybrid', model: 'no-signalling' },
		{ ...chsh, quantity: 'facet' },
		{ ...chsh, quantity: 'see-saw', dimension: [2, 3], state: 'maximally-entangled', seed: 7 },
		{ ...chsh, quantity: 'value', box: { family: 'isotropic', d: 2, E: '1/sqrt(2)' } },
		{
			...chsh,
			quantity: 'no-signalling',
			constraints: [{ expression: 'A0 B0', relation: '>=', value: 'cos(pi/8)' }]
		}
	];
	it.each(problems)('comes back as it is: %j', (problem) => {
		const once = parseProblem(problem);
		expect(parseProblem(JSON.parse(JSON.stringify(once)))).toEqual(once);
	});

	it('throws nothing but its own errors on any JSON', () => {
		const keys = fc.constantFrom(
			'outputs',
			'terms',
			'expression',
			'family',
			'box',
			'quantity',
			'level',
			'constraints',
			'name',
			'__proto__',
			'0,0|0,0',
			'dimension',
			'probabilities'
		);
		const values = fc.letrec<{ any: unknown }>((tie) => ({
			any: fc.oneof(
				{ maxDepth: 4 },
				fc.constantFrom<unknown>(
					'local',
					'npa',
					'value',
					'quantum',
					'chsh',
					'A0 B0',
					0,
					1,
					2,
					-1,
					0.5,
					null,
					true,
					'isotropic',
					'1/2'
				),
				fc.array(tie('any'), { maxLength: 3 }),
				fc.dictionary(keys, tie('any'), { maxKeys: 4 })
			)
		})).any;
		fc.assert(
			fc.property(
				fc.dictionary(keys, values, { maxKeys: 6 }),
				fc.constantFrom('local', 'npa', 'value', 'see-saw'),
				(json, quantity) => {
					const error = failure({ ...json, quantity });
					const known =
						error === null || error instanceof ProblemError || error instanceof ProblemLimitError;
					expect(known).toBe(true);
				}
			),
			{ numRuns: 2000 }
		);
	});
});
