/** The shape of a result as the command line prints it; result.ts reads one. */
import { z } from 'zod';
import { levelShape } from './problem-shape';

const kind = (what: string) => ({ error: `must be ${what}` });
const number = z.number(kind('a finite number'));
const nullable = z.number(kind('a finite number or null')).nullable();
const place = z.int(kind('a whole number')).min(0, 'must not be negative');
const fraction = z
	.string(kind('a text such as "1/2"'))
	.regex(/^-?\d{1,2000}(\/\d{1,2000})?$/, 'must be a fraction such as "1/2"');

const strategyList = z.array(z.array(place, kind('a list of outputs')), kind('a list of lists'));
const complex = z.tuple([number, number], kind('[re, im]'));
const matrix = z.array(z.array(complex, kind('a row of [re, im]')), kind('a list of rows'));

const deterministic = z.strictObject({
	kind: z.literal('deterministic-strategy'),
	strategy: strategyList,
	value: fraction.nullable(),
	enumerated: z.string().regex(/^\d{1,200}$/, 'must be a whole number as a text'),
	complete: z.literal(false, kind('false, or left out')).optional()
});

const linearProgramme = z.strictObject({
	kind: z.literal('linear-programme'),
	primal: z.record(z.string(), fraction, kind('an object from "a,b|x,y" to a fraction')),
	dual: z.record(z.string(), fraction, kind('an object from "a,b|x,y" to a fraction')),
	value: fraction.nullable()
});

const letter = z.tuple([place, place], kind('[input, output]'));
const monomials = z.array(
	z.array(z.array(letter, kind('a list of [input, output]')), kind('a list per party')),
	kind('a list of words')
);
const moments = z.strictObject({
	kind: z.literal('npa-dual'),
	monomials,
	multiplier: z.array(number, kind('a list of numbers')),
	rowMultipliers: z.record(z.string(), number, kind('an object to numbers')),
	constraintMultipliers: z.array(number, kind('a list of numbers')).optional(),
	shift: number.optional(),
	bound: number,
	moments: z.array(number, kind('a list of numbers')).nullable(),
	feasibleValue: nullable
});

const whole = z.union(
	[z.int(), z.string().regex(/^-?\d{1,200}$/)],
	kind('a whole number, as a text where it is 2^53 or more')
);
const exactMoments = z.strictObject({
	kind: z.literal('npa-exact'),
	monomials,
	denominator: whole,
	multiplier: z.array(whole, kind('a list of whole numbers')),
	rowMultipliers: z.record(z.string(), whole, kind('an object to whole numbers')),
	constraintMultipliers: z.array(whole, kind('a list of whole numbers')),
	shift: whole,
	bound: fraction,
	moments: z.array(number, kind('a list of numbers')).nullable(),
	feasibleValue: nullable
});

const quantumStrategy = z.strictObject({
	kind: z.literal('quantum-strategy'),
	strategy: z.strictObject({
		dimensions: z.array(place, kind('a list of whole numbers')),
		state: z.array(complex, kind('a list of [re, im]')),
		measurements: z.array(
			z.array(z.array(matrix, kind('a list of matrices'))),
			kind('matrices by party, input and output')
		)
	}),
	projective: z.boolean(kind('true or false')),
	bases: z
		.array(
			z.array(
				z.strictObject({
					vectors: matrix,
					outputs: z.array(place, kind('a list of outputs'))
				})
			),
			kind('bases by party and input')
		)
		.nullable(),
	value: number,
	violation: z.number(kind('a finite number')).min(0, 'must not be negative').optional()
});

const enclosure = z.strictObject({
	kind: z.literal('enclosure'),
	lower: z.discriminatedUnion('kind', [deterministic, quantumStrategy]).nullable(),
	upper: z.discriminatedUnion('kind', [moments, exactMoments]).nullable(),
	upperLevel: levelShape.nullable()
});

const localMixture = z.strictObject({
	kind: z.literal('local-mixture'),
	mixture: z.array(
		z.strictObject({ weight: fraction, strategy: strategyList }),
		kind('a list of weighted strategies')
	),
	multipliers: z.array(fraction, kind('a list of fractions')),
	value: fraction.nullable()
});

const group = z.array(place, kind('a list of parties'));
const fractions = z.record(z.string(), fraction, kind('an object from "a,b|x,y" to a fraction'));
const hybrid = z.strictObject({
	kind: z.literal('hybrid'),
	groups: z.array(group, kind('a list of groups')),
	behaviours: z.array(fractions, kind('a list of behaviours')),
	bipartitions: z.array(
		z.strictObject({
			groups: z.array(group, kind('a list of groups')),
			listed: place,
			branches: z.array(z.strictObject({ vertex: fractions, multipliers: fractions }))
		}),
		kind('a list of bipartitions')
	),
	value: fraction.nullable()
});

const facet = z.strictObject({
	kind: z.literal('facet'),
	maximum: fraction,
	strategies: z.array(strategyList, kind('a list of strategies')),
	vanishing: z
		.array(
			z.tuple([fraction, z.array(z.tuple([place, place, place]))], kind('[coefficient, events]')),
			kind('a list of [coefficient, events]')
		)
		.nullable()
});

export const certificateShape = z.discriminatedUnion(
	'kind',
	[
		deterministic,
		linearProgramme,
		moments,
		exactMoments,
		quantumStrategy,
		enclosure,
		localMixture,
		hybrid,
		facet
	],
	{
		error:
			'must be one of deterministic-strategy, linear-programme, npa-dual, npa-exact, ' +
			'quantum-strategy, enclosure, local-mixture, hybrid, facet'
	}
);

/** Everything but the problem, which problem.ts reads. */
export const resultShape = z.strictObject({
	format: z.literal(1, kind('1')),
	quantity: z.string(kind('a text')),
	status: z.literal('done', kind('done: only a finished result proves something')),
	lower: nullable,
	upper: nullable,
	value: nullable,
	tolerance: nullable,
	optimum: nullable,
	guaranteed: z.strictObject({
		lower: z.boolean(kind('true or false')),
		upper: z.boolean(kind('true or false'))
	}),
	exact: fraction.nullable(),
	/** What was run; nothing rests on it. */
	method: z.record(z.string(), z.unknown(), kind('an object')),
	seconds: z.number(kind('a number')).min(0, 'must not be negative'),
	seed: z.int(kind('a whole number')),
	solver: z.string(kind('a text')).max(100, 'has at most 100 characters'),
	problem: z.unknown(),
	certificate: certificateShape.nullable()
});
