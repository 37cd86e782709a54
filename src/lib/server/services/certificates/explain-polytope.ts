import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted, entries } from './counted';

/** What is read of a mixture of deterministic strategies under constraints. */
export interface LocalMixture {
	readonly kind: 'local-mixture';
	readonly mixture: readonly unknown[];
	readonly multipliers: readonly unknown[];
}

export function explainLocalMixture({
	kind,
	mixture,
	multipliers
}: LocalMixture): CertificateExplanation {
	return {
		kind,
		title: 'Mixture of deterministic strategies',
		claims:
			'The mixture meets the constraints and reaches the value; no local behaviour that meets them reaches more.',
		fields: [
			{
				name: 'mixture',
				what: 'Deterministic strategies, strategy[party][input] = output, each with its weight; the weights are fractions that sum to 1.',
				size: counted(mixture.length, 'strategy', 'strategies'),
				numbers: 'exact'
			},
			{
				name: 'multipliers',
				what: 'A fraction for each constraint: at least 0 for ≤, at most 0 for ≥, of any sign for =.',
				size: counted(multipliers.length, 'number'),
				numbers: 'exact'
			},
			{
				name: 'value',
				what: 'The maximum as a fraction; null where the two sides do not meet exactly.',
				size: 'one number',
				numbers: 'exact'
			}
		],
		proof: [
			'Lower side: the weighted sum of the strategies is a local behaviour; it meets each constraint, and the functional at it is the value.',
			'Upper side: take each constraint, times its multiplier, off the functional. What meets the constraints loses nothing by that, so the largest value over all strategies of what is left bounds it; the check enumerates them.'
		],
		parts: []
	};
}

/** What is read of a hybrid maximum: a bipartition with behaviours, and the upper sides of all. */
export interface Hybrid {
	readonly kind: 'hybrid';
	readonly groups: readonly (readonly number[])[];
	readonly behaviours: readonly Readonly<Record<string, string>>[];
	readonly bipartitions: readonly { readonly branches: readonly unknown[] }[];
}

export function explainHybrid({
	kind,
	groups,
	behaviours,
	bipartitions
}: Hybrid): CertificateExplanation {
	const letters = (group: readonly number[]) =>
		group.map((party) => 'ABCDEF'.charAt(party)).join('');
	const branches = bipartitions.reduce((sum, { branches: list }) => sum + list.length, 0);
	return {
		kind,
		title: 'Hybrid maximum',
		claims:
			'Parties that share out into two groups reach the value, and no behaviour that is local across some bipartition reaches more.',
		fields: [
			{
				name: 'groups',
				what: 'The bipartition of the parties that reaches the value.',
				size: groups.map(letters).join(' | '),
				numbers: 'exact'
			},
			{
				name: 'behaviours',
				what: 'A behaviour of each group, by the outputs and inputs of its parties; entries left out are 0.',
				size: behaviours.map(entries).join(', '),
				numbers: 'exact'
			},
			{
				name: 'bipartitions',
				what: 'For each bipartition the vertices of one group’s no-signalling polytope, each with multipliers of the other’s rows P ≥ 0. Empty in Svetlichny’s model, where the check enumerates.',
				size: bipartitions.length === 0 ? 'left out' : counted(branches, 'vertex', 'vertices'),
				numbers: bipartitions.length === 0 ? 'none' : 'exact'
			},
			{
				name: 'value',
				what: 'The maximum as a fraction; null where the two sides do not meet exactly.',
				size: 'one number',
				numbers: 'exact'
			}
		],
		proof: [
			'Lower side: the functional at the product of the groups’ behaviours is the value.',
			'Upper side, for every bipartition: at each vertex of one group the functional is one of the other group alone, which the multipliers bound as in a linear programme. Mixtures of products reach no more than the best product.'
		],
		parts: []
	};
}

/** What is read of a facet test. */
export interface Facet {
	readonly kind: 'facet';
	readonly strategies: readonly unknown[];
	readonly vanishing: readonly unknown[] | null;
}

export function explainFacet({ kind, strategies, vanishing }: Facet): CertificateExplanation {
	const isFacet = vanishing === null;
	return {
		kind,
		title: 'Facet test',
		claims: isFacet
			? 'The inequality is a facet of the local polytope: as many affinely independent strategies reach its maximum as the polytope has dimensions.'
			: 'The inequality is no facet of the local polytope: whatever reaches its maximum satisfies another equality, too.',
		fields: [
			{
				name: 'maximum',
				what: 'The local maximum as a fraction.',
				size: 'one number',
				numbers: 'exact'
			},
			{
				name: 'strategies',
				what: 'Affinely independent deterministic strategies that reach it, [party][input] = output.',
				size: counted(strategies.length, 'strategy', 'strategies'),
				numbers: 'exact'
			},
			{
				name: 'vanishing',
				what: 'Of what is no facet: a functional that is 0 wherever the maximum is reached, and no multiple of the inequality.',
				size: vanishing === null ? 'left out' : counted(vanishing.length, 'term'),
				numbers: vanishing === null ? 'none' : 'exact'
			}
		],
		proof: isFacet
			? [
					'The functional at each strategy is the maximum, and no strategy exceeds it: the check enumerates them.',
					'The strategies, as vectors of probabilities, are affinely independent by exact elimination; there are as many as the polytope has dimensions, so they span a face one dimension below it.'
				]
			: [
					'The functional at each strategy is the maximum, and no strategy exceeds it: the check enumerates them.',
					'The other functional is 0 at every strategy that reaches the maximum, so that these lie in a space of one dimension less than a facet has.'
				],
		parts: []
	};
}
