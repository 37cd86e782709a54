/**
 * Check of a deterministic strategy: its value is recomputed from the terms, exactly. The upper
 * side is proved by plain enumeration, from scratch for every strategy, while that is cheap.
 */
import {
	ZERO,
	exactOfDouble,
	parseRational,
	printRational,
	toDoubleDown,
	toDoubleUp,
	type Rational
} from '../exact/rational';
import type { Functional } from '../scenario/functional';
import { enumerateAgain, exactOf } from './enumerate-again';
import type { CheckOutcome, DeterministicCertificate } from './types';

/** Proves `lower` (and, by enumeration of a small problem, `upper`) of the local maximum of g. */
export function checkDeterministicStrategy(
	g: Functional,
	certificate: DeterministicCertificate
): CheckOutcome {
	const defect = strategyDefect(g, certificate.strategy);
	if (defect) return { checked: false, reason: defect };
	const { strategy } = certificate;
	const value = valueOfStrategy(g, strategy);
	const allowance = allowanceOf(g);
	const rational = g.terms.every((term) => term.coefficient.exact);
	if (certificate.value !== null) {
		const stated = parseRational(certificate.value);
		if (!rational || !stated?.equals(value))
			return {
				checked: false,
				reason: `the strategy's value is ${printRational(value)}, not ${certificate.value}`
			};
	}
	const maximum = enumerateAgain(g);
	const best = certificate.complete !== false;
	if (best && maximum !== null && maximum.compare(value) > 0 && rational)
		return {
			checked: false,
			reason: `another strategy reaches ${printRational(maximum)}, more than ${printRational(value)}`
		};
	return {
		checked: true,
		lower: toDoubleDown(value.sub(allowance)),
		upper: maximum === null ? null : toDoubleUp(maximum.add(allowance)),
		exact: rational && maximum?.equals(value) ? printRational(value) : null,
		method:
			maximum === null
				? 'value of the strategy recomputed; only the lower side is checked, the enumeration is too large to repeat here'
				: 'value of the strategy recomputed, all strategies enumerated again'
	};
}

/** g at a deterministic strategy; doubles stand for irrational coefficients. */
export function valueOfStrategy(g: Functional, strategy: readonly (readonly number[])[]): Rational {
	let value = ZERO;
	for (const term of g.terms)
		if (term.events.every(([p, x, a]) => strategy[p]?.[x] === a)) value = value.add(exactOf(term));
	return value;
}

export function strategyDefect(
	g: Functional,
	strategy: readonly (readonly number[])[]
): string | null {
	const { outputs } = g.scenario;
	if (!Array.isArray(strategy) || strategy.length !== outputs.length)
		return `the strategy is not for ${outputs.length} parties`;
	for (const [p, counts] of outputs.entries()) {
		if (strategy[p]?.length !== counts.length)
			return `the strategy of party ${p} does not answer its ${counts.length} inputs`;
		for (const [x, count] of counts.entries()) {
			const output = strategy[p]?.[x] ?? -1;
			if (!Number.isInteger(output) || output < 0 || output >= count)
				return `the strategy of party ${p} answers input ${x} with no output of it`;
		}
	}
	return null;
}

/** What the true value may differ by on any behaviour: every probability is at most 1. */
export function allowanceOf(g: Functional): Rational {
	return g.terms.reduce(
		(sum, { coefficient: c }) => (c.exact ? sum : sum.add(exactOfDouble(c.error))),
		ZERO
	);
}
