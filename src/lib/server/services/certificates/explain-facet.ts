import type { FacetCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted } from './counted';

export function explainFacet({
	maximum,
	strategies,
	vanishing
}: FacetCertificate): CertificateExplanation {
	return {
		kind: 'facet',
		title: 'Strategies that reach the local maximum',
		claims:
			'The strategies are affinely independent and reach the local maximum. As many of them as the dimension of the no-signalling space make a facet.',
		fields: [
			{
				name: 'maximum',
				what: 'The local maximum, a fraction.',
				size: maximum,
				numbers: 'exact'
			},
			{
				name: 'strategies',
				what: 'Deterministic strategies, each [party][input] = output.',
				size: counted(strategies.length, 'strategy', 'strategies'),
				numbers: 'exact'
			},
			{
				name: 'vanishing',
				what: 'Of no facet: another functional that is 0 at every strategy that reaches the maximum.',
				size: vanishing ? counted(vanishing.length, 'term') : 'left out',
				numbers: vanishing ? 'exact' : 'none'
			}
		],
		proof: [
			'The check finds the maximum again by comparing all deterministic strategies, evaluates those listed, and finds their rank in whole numbers.',
			vanishing
				? 'The second functional vanishes wherever the maximum is reached and is no multiple of the first: those strategies lie in a smaller face.'
				: 'With full rank only one hyperplane passes through them: the inequality’s own.'
		],
		parts: []
	};
}
