import type { HybridCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted } from './counted';
import { MAXIMUM_FIELD } from './maximum-field';

const letters = (group: readonly number[]) =>
	group.map((party) => String.fromCharCode(65 + party)).join('');

export function explainHybrid({ groups, bipartitions }: HybridCertificate): CertificateExplanation {
	const branches = bipartitions.reduce((sum, part) => sum + part.branches.length, 0);
	return {
		kind: 'hybrid',
		title: 'Models that are local across a bipartition',
		claims:
			'The two behaviours reach the value together, and no bipartition of the parties allows more: it is the maximum of the model.',
		fields: [
			{
				name: 'groups',
				what: 'The bipartition of the parties that reaches the value.',
				size: groups.map(letters).join(' | '),
				numbers: 'exact'
			},
			{
				name: 'behaviours',
				what: 'A behaviour of each group under "a,b|x,y" (its own parties in order); entries left out are 0.',
				size: 'one table for each group',
				numbers: 'exact'
			},
			{
				name: 'bipartitions',
				what: 'No-signalling groups only: for every bipartition, each vertex of one group with multipliers of the other group’s rows P ≥ 0.',
				size:
					bipartitions.length > 0
						? `${counted(bipartitions.length, 'bipartition')}, ${counted(branches, 'vertex', 'vertices')}`
						: 'left out: the strategies are compared instead',
				numbers: bipartitions.length > 0 ? 'exact' : 'none'
			},
			MAXIMUM_FIELD
		],
		proof: [
			'Lower side: both tables are distributions (and no-signalling, in that model), and the functional at their product is the value.',
			bipartitions.length > 0
				? 'Upper side: for a fixed bipartition the functional is linear in either group’s behaviour, so it is largest at a vertex of one group. There it is a functional of the other group, which its multipliers bound as in a linear programme.'
				: 'Upper side: with each group as one party that sees all its inputs and gives all its outputs, the maximum is that over deterministic strategies; the check compares them again.'
		],
		parts: []
	};
}
