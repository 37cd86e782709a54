/**
 * Check of the local maximum under linear constraints. Lower side: the mixture of strategies meets
 * the constraints exactly, and g is evaluated on it. Upper side: with the multipliers, the maximum of
 * g - sum m_k (form_k - value_k) over all strategies, enumerated again while that is cheap.
 */
import { exactCoefficient, multiplyCoefficients } from '../exact/coefficient';
import { ZERO, parseRational, printRational, type Rational } from '../exact/rational';
import type { ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { allowanceOf, strategyDefect, valueOfStrategy } from './check-deterministic-strategy';
import { enumerateAgain } from './enumerate-again';
import { firstIrrational, isBroken, readConstraint, type ReadConstraint } from './read-constraint';
import { outcomeOfTwoSides } from './two-sides';
import type { CheckOutcome, LocalMixtureCertificate } from './types';

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

/** Proves both sides (the upper of a large enumeration excepted). */
export function checkLocalMixture(
	problem: ProblemOf<'local'>,
	g: Functional,
	certificate: LocalMixtureCertificate
): CheckOutcome {
	const constraints = problem.constraints.map((constraint) =>
		readConstraint(g.scenario, constraint)
	);
	const irrational = firstIrrational(constraints);
	if (irrational >= 0) return refuse(`constraint ${irrational} is irrational`);
	const below = valueOfMixture(g, constraints, certificate);
	if (typeof below === 'string') return refuse(`mixture: ${below}`);
	const relaxed = relaxedFunctional(g, constraints, certificate.multipliers);
	if (typeof relaxed === 'string') return refuse(`multipliers: ${relaxed}`);
	const above = enumerateAgain(relaxed);

	const allowance = allowanceOf(g);
	const rational = allowance.n === 0n && g.terms.every(({ coefficient }) => coefficient.exact);
	return outcomeOfTwoSides(
		certificate.value,
		{ below, above, allowance, rational },
		above
			? 'mixture and multipliers evaluated in exact rationals, all strategies enumerated again'
			: 'mixture evaluated in exact rationals; only the lower side is checked, the enumeration is too large to repeat here'
	);
}

/** g on the mixture, or what is wrong with it. */
function valueOfMixture(
	g: Functional,
	constraints: readonly ReadConstraint[],
	{ mixture }: LocalMixtureCertificate
): Rational | string {
	let total = ZERO;
	let value = ZERO;
	const sums = constraints.map(() => ZERO);
	for (const [i, { weight, strategy }] of mixture.entries()) {
		const share = parseRational(weight);
		if (!share || share.compare(0) < 0) return `the weight ${i} is no fraction from 0`;
		const defect = strategyDefect(g, strategy);
		if (defect) return `strategy ${i}: ${defect}`;
		total = total.add(share);
		value = value.add(share.mul(valueOfStrategy(g, strategy)));
		constraints.forEach(({ form }, k) => {
			sums[k] = (sums[k] ?? ZERO).add(share.mul(valueOfStrategy(form, strategy)));
		});
	}
	if (!total.equals(1)) return `the weights sum to ${printRational(total)}, not 1`;
	const broken = constraints.findIndex(({ relation }, k) => isBroken(relation, sums[k] ?? ZERO));
	return broken < 0 ? value : `constraint ${broken} is violated`;
}

/** g - sum m_k (form_k - value_k), or what is wrong with the multipliers. */
function relaxedFunctional(
	g: Functional,
	constraints: readonly ReadConstraint[],
	multipliers: readonly string[]
): Functional | string {
	if (multipliers.length !== constraints.length)
		return `there are ${multipliers.length}, not ${constraints.length}`;
	const terms = [...g.terms];
	for (const [k, { form, relation }] of constraints.entries()) {
		const multiplier = parseRational(multipliers[k] ?? '');
		if (!multiplier) return `the one of constraint ${k} is no fraction`;
		const sign = multiplier.compare(0);
		if ((relation === '<=' && sign < 0) || (relation === '>=' && sign > 0))
			return `the one of constraint ${k} has the wrong sign`;
		const factor = exactCoefficient(multiplier.neg());
		for (const { coefficient, events } of form.terms)
			terms.push({ events, coefficient: multiplyCoefficients(factor, coefficient) });
	}
	// Not merged: a sum of an irrational coefficient and a rational one would be rounded again.
	return { scenario: g.scenario, terms };
}
