import fc from 'fast-check';
import { parseCoefficient } from '../../src/lib/nonlocality/exact/expression';
import { makeFunctional, type Functional } from '../../src/lib/nonlocality/scenario/functional';
import type { Event } from '../../src/lib/nonlocality/scenario/scenario';

/** Rational and irrational numbers in the forms coefficients are kept in. */
export const anyCoefficient = fc
	.oneof(
		{ weight: 3, arbitrary: fc.integer({ min: -9, max: 9 }).map(String) },
		{
			weight: 3,
			arbitrary: fc
				.tuple(fc.integer({ min: -99, max: 99 }), fc.integer({ min: 1, max: 99 }))
				.map(([p, q]) => `${p}/${q}`)
		},
		fc
			.tuple(fc.integer({ min: -1e9, max: 1e9 }), fc.integer({ min: -15, max: 3 }))
			.map(([digits, exponent]) => `${digits}e${exponent}`),
		fc.constantFrom(
			'sqrt(2)',
			'-2*sqrt(3)/7',
			'1/2-sqrt(5)',
			'-1-sqrt(2)',
			'sqrt(6)*pi',
			'cos(pi/8)',
			'-3*cos(pi/7)*sqrt(2)',
			'sin(1)',
			'sqrt(1+sqrt(2))',
			'1/(1+pi)',
			'-2/(1+sqrt(2)+sqrt(3))',
			'pi^2-1',
			'1e-12',
			'1e12'
		)
	)
	.map(parseCoefficient);

interface Shape {
	readonly parties: readonly [number, number];
	readonly inputs: readonly [number, number];
	readonly outputs: readonly [number, number];
}

export const anyScenario = ({ parties, inputs, outputs }: Shape) =>
	fc
		.array(
			fc.array(fc.integer({ min: outputs[0], max: outputs[1] }), {
				minLength: inputs[0],
				maxLength: inputs[1]
			}),
			{ minLength: parties[0], maxLength: parties[1] }
		)
		.map((list): number[][] => list);

/** A few terms in a scenario; with `full`, events of all parties in each. */
export function anyFunctional(
	outputs: readonly (readonly number[])[],
	full = false
): fc.Arbitrary<Functional> {
	const event = (counts: readonly number[], party: number): fc.Arbitrary<Event[]> =>
		fc
			.tuple(fc.nat(counts.length - 1), fc.nat(), full ? fc.constant(true) : fc.boolean())
			.map(([x, a, there]) => (there ? [[party, x, a % (counts[x] ?? 1)]] : []));
	const term = fc
		.tuple(anyCoefficient, fc.tuple(...outputs.map(event)))
		.map(([coefficient, events]) => ({ coefficient, events: events.flat() }));
	return fc.array(term, { maxLength: 8 }).map((terms) => makeFunctional({ outputs }, terms));
}
