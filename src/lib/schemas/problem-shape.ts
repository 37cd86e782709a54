/** The shape of a problem as people write it; problem.ts turns it into a normalised one. */
import { z } from 'zod';
import { RELATIONS, SENSES } from '../ledger/claim';
import { FORMAT } from '../nonlocality/notation';

/** Sizes past which a problem is refused unread. Solvers have narrower limits of their own. */
export const PROBLEM_LIMITS = {
	parties: 6,
	/** Level 1 with two outcomes takes hundreds; what can't be had of so many is refused by its solver. */
	inputs: 200,
	outputs: 64,
	/** A correlator table of two parties with all these inputs. */
	terms: 170_000,
	/** Terms once the last outputs are written as 1 minus the others. */
	expandedTerms: 500_000,
	/** Joint probabilities of the whole scenario. */
	tableEntries: 1_000_000,
	constraints: 50,
	probabilities: 100_000,
	coefficientCharacters: 1_000,
	dimension: 16,
	/** Largest local dimension to grow to, and of a strategy to start from. */
	grow: 64,
	level: 10,
	products: 200,
	starts: 10_000,
	seconds: 3_600
} as const;

const kind = (what: string) => ({ error: `must be ${what}` });
const count = (minimum: number) =>
	z.int(kind('a whole number')).min(minimum, `must be at least ${minimum}`);

/** A JSON number, or a text that reads as one. */
export const coefficientShape = z.union(
	[z.number(), z.string().max(PROBLEM_LIMITS.coefficientCharacters)],
	kind('a number, or a text such as "1/2" or "sqrt(2)"')
);
export type CoefficientShape = z.infer<typeof coefficientShape>;

export const outputsShape = z
	.array(
		z
			.array(count(2), kind('a list with the number of outputs of each input'))
			.min(1, 'must have an input'),
		kind('a list of lists, one per party')
	)
	.min(1, 'must have a party');

const termShape = z.tuple(
	[
		coefficientShape,
		z.array(
			z.tuple([count(0), count(0), count(0)], kind('[party, input, output]')),
			kind('a list of [party, input, output]')
		)
	],
	kind('[coefficient, events]')
);

const tableShape = z.array(
	z.array(coefficientShape, kind('a row of numbers')),
	kind('a list of rows')
);
const entriesShape = z.record(
	z.string().regex(/^[\d,]{1,40}\|[\d,]{1,40}$/, '"a,b|x,y" names a probability'),
	coefficientShape,
	kind('an object from "a,b|x,y" to a number')
);

/** Ways to give a functional; at most one of them is present. */
export const functionalShape = {
	terms: z.array(termShape, kind('a list of [coefficient, events]')).optional(),
	expression: z.string(kind('a text')).optional(),
	indexBase: z.union([z.literal(0), z.literal(1)], kind('0 or 1')).optional(),
	family: z
		.strictObject(
			{
				name: z.string(kind('a text')),
				alpha: coefficientShape.optional(),
				n: coefficientShape.optional(),
				d: coefficientShape.optional(),
				matrix: tableShape.optional()
			},
			kind('an object such as {"name": "chsh"}')
		)
		.optional(),
	collinsGisin: tableShape.optional(),
	correlators: tableShape.optional(),
	probabilities: entriesShape.optional()
};
export const FUNCTIONAL_FIELDS = [
	'terms',
	'expression',
	'family',
	'collinsGisin',
	'correlators',
	'probabilities'
] as const;

const complexShape = z.tuple([coefficientShape, coefficientShape], kind('[re, im]'));
const strategyShape = {
	state: z.array(complexShape, kind('a list of [re, im]')),
	/** [party][input][output][row][column] */
	measurements: z.array(
		z.array(z.array(z.array(z.array(complexShape)))),
		kind('matrices by party, input and output')
	)
};

export const boxShape = z.union(
	[
		z.strictObject({ family: z.literal('isotropic'), d: count(2), E: coefficientShape }),
		z.strictObject({ family: z.literal('uniform') }),
		z.strictObject({
			family: z.literal('deterministic'),
			strategy: z.array(
				z.array(count(0), kind('a list of outputs')),
				kind('a list of lists: the output of each input, per party')
			)
		}),
		z.strictObject({ family: z.literal('quantum'), ...strategyShape }),
		// as a normalised problem stores it
		z.strictObject({ kind: z.literal('table'), probabilities: entriesShape }),
		z.strictObject({
			kind: z.literal('quantum'),
			strategy: z.strictObject({ dimensions: z.array(count(1)), ...strategyShape })
		}),
		entriesShape
	],
	kind(
		'a table of probabilities, or one of the families isotropic, uniform, deterministic, quantum, with its fields'
	)
);
export type BoxShape = z.infer<typeof boxShape>;

export const levelShape = z.union(
	[
		count(1),
		z.literal('1+AB'),
		z.strictObject({ perParty: count(1) }),
		z.strictObject({ products: z.array(z.string().regex(/^[A-F]{1,20}$/)).min(1) })
	],
	kind('1, 2, 3 ..., "1+AB", {"perParty": 1} or {"products": ["A", "B", "AB"]}')
);

export const constraintShape = z.strictObject({
	...functionalShape,
	relation: z.enum(RELATIONS, kind('=, <= or >=')),
	value: coefficientShape
});

/** A strategy to start from: as a box, or as results and normalised problems store it. */
export const startShape = z.union(
	[
		z.strictObject({ family: z.literal('quantum'), ...strategyShape }),
		z.strictObject({
			kind: z.literal('quantum'),
			strategy: z.strictObject({ dimensions: z.array(count(1)), ...strategyShape })
		}),
		z.strictObject({ dimensions: z.array(count(1)), ...strategyShape })
	],
	kind('a quantum strategy such as {"family": "quantum", "state": [...], "measurements": [...]}')
);
export type StartShape = z.infer<typeof startShape>;

export const problemShape = z.strictObject({
	format: z.literal(FORMAT, kind(String(FORMAT))).optional(),
	outputs: outputsShape.optional(),
	...functionalShape,
	box: boxShape.optional(),
	constraints: z.array(constraintShape, kind('a list of constraints')).optional(),
	quantity: z.string(kind('a text')),
	sense: z.enum(SENSES, kind('max or min')).optional(),
	model: z
		.enum(['svetlichny', 'no-signalling'], kind('"svetlichny" or "no-signalling"'))
		.optional(),
	level: levelShape.optional(),
	nonNegative: z.boolean(kind('true or false')).optional(),
	dimension: z
		.union([count(1), z.array(count(1)).min(1)], kind('a whole number, or one per party'))
		.optional(),
	starts: count(1).optional(),
	grow: count(1).optional(),
	start: startShape.optional(),
	state: z
		.union(
			[z.enum(['free', 'maximally-entangled']), strategyShape.state],
			kind('"maximally-entangled", or a list of [re, im]')
		)
		.optional(),
	levels: z.array(levelShape, kind('a list of levels')).min(1, 'must name a level').nullish(),
	dimensions: z
		.array(count(1), kind('a list of whole numbers'))
		.min(1, 'must name a dimension')
		.nullish(),
	gap: z.number(kind('a number')).min(0, 'must not be negative').optional(),
	within: z
		.tuple([z.number(), z.number()], kind('two numbers, [low, high]'))
		.refine(([low, high]) => low <= high, 'must have low at most high')
		.optional(),
	seconds: z.number(kind('a number')).positive('must be positive').optional(),
	seed: count(0)
		.max(2 ** 32 - 1, 'must be below 2^32')
		.optional(),
	precision: z.number(kind('a number')).positive('must be positive').optional()
});
export type ProblemShape = z.infer<typeof problemShape>;
export type FunctionalShape = Pick<ProblemShape, keyof typeof functionalShape>;
