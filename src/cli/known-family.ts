import { encloseCoefficient, type RationalInterval } from '../lib/ledger/enclose-coefficient';
import type { NormalisationContext } from '../lib/ledger/normalisations';
import { affineMap, type Problem } from '../lib/nonlocality';
import {
	familyFunctional,
	functionalOfTerms,
	parseCoefficient,
	scaleFunctional,
	type FamilySpec
} from '../lib/nonlocality/notation';

/** Finding an equivalence of more inputs or parties than this takes longer than it is worth here. */
const LARGEST_CHAIN = 6;
const MINUS_ONE = parseCoefficient('-1');

/**
 * The family a problem's functional is a member of, up to relabelling, scale (a negative one turns
 * maxima into minima) and constant, with the map between the two; nothing when it is none of those
 * that have published normalisations.
 */
export function knownFamily(problem: Problem): Pick<NormalisationContext, 'family' | 'fromFamily'> {
	const functional = functionalOfTerms(problem.outputs, problem.terms);
	for (const candidate of candidates(problem.outputs)) {
		const member = familyFunctional(candidate);
		const direct = affineMap(functional, member);
		const map = direct ?? affineMap(scaleFunctional(functional, MINUS_ONE), member);
		if (!map) continue;
		const { low: scale } = signed(encloseCoefficient(map.scale), direct !== null);
		const { low: shift } = signed(encloseCoefficient(map.shift), direct !== null);
		const parameter = candidate.d ?? candidate.n;
		const family = { name: candidate.name, ...(parameter ? { parameter: Number(parameter) } : {}) };
		return { family, fromFamily: { scale, shift } };
	}
	return { family: null };
}

function signed({ low, high }: RationalInterval, positive: boolean): RationalInterval {
	return positive ? { low, high } : { low: high.neg(), high: low.neg() };
}

function candidates(outputs: Problem['outputs']): FamilySpec[] {
	const inputs = outputs.map((party) => party.length).sort((a, b) => a - b);
	const counts = new Set(outputs.flat());
	const [d] = counts;
	if (counts.size !== 1 || d === undefined) return [];
	const [first, second] = inputs;
	if (outputs.length > 2)
		return d === 2 && inputs.every((count) => count === 2) && outputs.length <= LARGEST_CHAIN
			? [
					{ name: 'mermin', n: outputs.length },
					{ name: 'svetlichny', n: outputs.length }
				]
			: [];
	if (first === 2 && second === 2) return d === 2 ? [{ name: 'chsh' }] : [{ name: 'cglmp', d }];
	if (d !== 2) return [];
	if (first === 3 && second === 4) return [{ name: 'elegant' }];
	if (first === undefined || first !== second || first > LARGEST_CHAIN) return [];
	const chained = { name: 'chained', n: first };
	return first === 3 ? [{ name: 'i3322' }, chained] : [chained];
}
