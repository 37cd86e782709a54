/**
 * Check of a facet test. The local maximum is enumerated again; the listed strategies reach it and
 * are affinely independent. As many as the polytope has dimensions make a facet. That it is none is
 * proved by a second functional that vanishes at every strategy that reaches the maximum.
 */
import { parseRational, printRational, ratio, ZERO, type Rational } from '../exact/rational';
import { collinsGisinForm, eventsKey, type Functional } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import { strategyDefect, valueOfStrategy } from './check-deterministic-strategy';
import { enumerateAgain, vanishesWhereBest } from './enumerate-again';
import { independentModulo } from './modular-independence';
import type { CheckOutcome, FacetCertificate } from './types';

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

/** Proves that g <= its local maximum is a facet (1) or not (0). */
export function checkFacet(g: Functional, certificate: FacetCertificate): CheckOutcome {
	if (g.terms.some(({ coefficient }) => !coefficient.exact))
		return refuse('a facet test needs rational coefficients');
	const maximum = parseRational(certificate.maximum);
	const found = enumerateAgain(g);
	if (!found) return refuse('the enumeration of all strategies is too large to repeat here');
	if (!maximum?.equals(found)) return refuse(`the local maximum is ${printRational(found)}`);

	const { strategies, vanishing } = certificate;
	for (const [k, strategy] of strategies.entries()) {
		const defect = strategyDefect(g, strategy);
		if (defect) return refuse(`strategy ${k}: ${defect}`);
		if (!valueOfStrategy(g, strategy).equals(maximum))
			return refuse(`strategy ${k} does not reach the local maximum`);
	}
	if (!independentModulo(g.scenario, strategies))
		return refuse('the strategies are not shown to be affinely independent');
	const form = collinsGisinForm(g);
	const constant = form.terms.every(({ events }) => events.length === 0);
	const dimension =
		g.scenario.outputs.reduce(
			(product, counts) => product * counts.reduce((sum, count) => sum + count - 1, 1),
			1
		) - 1;
	if (constant)
		return proved(0, 'a constant bounds nothing: all strategies reach the local maximum');
	if (strategies.length >= dimension)
		return proved(1, `${dimension} affinely independent strategies reach the local maximum`);
	if (!vanishing) return refuse(`${strategies.length} strategies are too few for a facet`);
	const other = functionalOfTerms(g.scenario, vanishing);
	if (isMultiple(collinsGisinForm(other), form, maximum))
		return refuse('the second functional is a multiple of the first');
	const vanishes = vanishesWhereBest(g, other, maximum);
	if (vanishes === null) return refuse('the enumeration of all strategies is too large here');
	if (!vanishes) return refuse('the second functional does not vanish where the first is largest');
	return proved(
		0,
		'a second functional vanishes at every strategy that reaches the local maximum, all enumerated'
	);
}

function proved(value: 0 | 1, method: string): CheckOutcome {
	return { checked: true, lower: value, upper: value, exact: String(value), method };
}

/** Whether h is a multiple of form - maximum (0 included). */
function isMultiple(h: Functional, form: Functional, maximum: Rational): boolean {
	const own = coefficientsOf(form);
	own.set('', (own.get('') ?? ZERO).sub(maximum));
	const others = coefficientsOf(h);
	const [key] = [...own].find(([, value]) => value.n !== 0n) ?? [''];
	const scale = (others.get(key) ?? ZERO).div(own.get(key) ?? ratio(1n));
	const keys = new Set([...own.keys(), ...others.keys()]);
	return [...keys].every((k) => (others.get(k) ?? ZERO).equals((own.get(k) ?? ZERO).mul(scale)));
}

function coefficientsOf(form: Functional): Map<string, Rational> {
	return new Map(
		form.terms.map(({ coefficient, events }) => [eventsKey(events), coefficient.exact ?? ZERO])
	);
}
