/** Check of an enclosure of the quantum maximum: each side by the check of its own kind. */
import type { Level, ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { checkDeterministicStrategy } from './check-deterministic-strategy';
import { checkExactMoments } from './check-exact-moments';
import { checkMomentCertificate } from './check-moments';
import { checkStrategy } from './check-quantum-strategy';
import type { CheckOutcome, EnclosureCertificate } from './types';

type Lower = EnclosureCertificate['lower'];

/**
 * Proves `lower` from the strategy and `upper` from the multiplier. A relaxation's feasible moments
 * say nothing on the quantum maximum: of that certificate only the upper side counts.
 */
export function checkEnclosure(
	problem: ProblemOf<'quantum'>,
	g: Functional,
	certificate: EnclosureCertificate
): CheckOutcome {
	const { lower, upper } = certificate;
	if (problem.constraints.length > 0)
		return refuse('an enclosure of the quantum maximum knows no constraints');
	if (!lower && !upper) return refuse('the enclosure has neither side');
	const below = lower ? checkLower(problem, g, lower) : null;
	if (below?.checked === false) return refuse(`lower side: ${below.reason}`);
	let above: CheckOutcome | null = null;
	if (upper) {
		const level = readLevel(certificate.upperLevel);
		if (level === null) return refuse('upper side: its level cannot be read');
		above = checkUpper({ ...problem, quantity: 'npa', level, nonNegative: false }, g, upper);
		if (!above.checked) return refuse(`upper side: ${above.reason}`);
	}
	if (below && above && (below.lower ?? -Infinity) > (above.upper ?? Infinity))
		return refuse('the two sides contradict each other');
	return {
		checked: true,
		lower: below?.lower ?? null,
		upper: above?.upper ?? null,
		exact: null,
		...(above?.exactBound !== undefined && { exactBound: above.exactBound }),
		method: [below?.method, above?.method].filter((text) => text !== undefined).join('; ')
	};
}

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

function checkLower(
	problem: ProblemOf<'quantum'>,
	g: Functional,
	lower: NonNullable<Lower>
): CheckOutcome {
	switch (lower.kind) {
		case 'deterministic-strategy':
			return checkDeterministicStrategy(g, lower);
		case 'quantum-strategy':
			return checkStrategy(problem, g, lower);
		default:
			return refuse('it is no strategy');
	}
}

function checkUpper(
	relaxation: ProblemOf<'npa'>,
	g: Functional,
	upper: NonNullable<EnclosureCertificate['upper']>
): CheckOutcome {
	const none = { moments: null, feasibleValue: null };
	switch (upper.kind) {
		case 'npa-dual':
			return checkMomentCertificate(relaxation, g, { ...upper, ...none });
		case 'npa-exact':
			return checkExactMoments(relaxation, g, { ...upper, ...none });
		default:
			return refuse('it is no multiplier of a relaxation');
	}
}

/** A level of the problem format out of any JSON; null when it is none. */
function readLevel(value: unknown): Level | null {
	if (value === '1+AB') return value;
	if (typeof value === 'number') return Number.isInteger(value) && value >= 1 ? value : null;
	if (typeof value !== 'object' || value === null) return null;
	if ('perParty' in value) {
		const { perParty } = value;
		const fits = typeof perParty === 'number' && Number.isInteger(perParty) && perParty >= 1;
		return fits ? { perParty } : null;
	}
	if (!('products' in value) || !Array.isArray(value.products)) return null;
	const products: unknown[] = value.products;
	return products.every((product) => typeof product === 'string') ? { products } : null;
}
