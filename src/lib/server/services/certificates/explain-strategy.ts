import type { DeterministicCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted } from './counted';

export function explainStrategy({
	strategy,
	enumerated
}: DeterministicCertificate): CertificateExplanation {
	const inputs = strategy.reduce((sum, party) => sum + party.length, 0);
	return {
		kind: 'deterministic-strategy',
		title: 'Deterministic strategy',
		claims:
			'This strategy reaches the value, so the local maximum is at least that; no other strategy reaches more, so it is exactly that.',
		fields: [
			{
				name: 'strategy',
				what: 'strategy[party][input] is the output that the party gives to that input, all counted from 0.',
				size: `${counted(strategy.length, 'party', 'parties')}, ${counted(inputs, 'input')}`,
				numbers: 'exact'
			},
			{
				name: 'value',
				what: 'The functional at the strategy, as a fraction; null where a coefficient is irrational.',
				size: 'one number',
				numbers: 'exact'
			},
			{
				name: 'enumerated',
				what: 'How many joint strategies the search compared; all but one party are listed, the last answers as well as it can.',
				size: `${enumerated} compared`,
				numbers: 'exact'
			}
		],
		proof: [
			'Give every probability of the functional the value 1 where the strategy gives those outputs, else 0, and add up the coefficients: the sum is the value. That proves the lower side in exact arithmetic.',
			'For the upper side compare all strategies: a local behaviour is a mixture of deterministic ones, and a linear functional is largest at one of them. The check repeats a small enumeration; that of a large one rests on the solver.'
		],
		parts: []
	};
}
