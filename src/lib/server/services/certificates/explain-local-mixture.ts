import type { LocalMixtureCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted } from './counted';
import { MAXIMUM_FIELD } from './maximum-field';

export function explainLocalMixture({
	mixture,
	multipliers
}: LocalMixtureCertificate): CertificateExplanation {
	return {
		kind: 'local-mixture',
		title: 'Mixture of deterministic strategies',
		claims:
			'The mixture meets the constraints and reaches the value, and the multipliers allow no more: it is the local maximum under the constraints.',
		fields: [
			{
				name: 'mixture',
				what: 'Deterministic strategies, strategy[party][input] = output, each with its weight; the weights sum to 1.',
				size: counted(mixture.length, 'strategy', 'strategies'),
				numbers: 'exact'
			},
			{
				name: 'multipliers',
				what: 'A multiplier m for each constraint: at least 0 for ≤, at most 0 for ≥, any for =.',
				size: counted(multipliers.length, 'number'),
				numbers: 'exact'
			},
			MAXIMUM_FIELD
		],
		proof: [
			'Lower side: the mixture meets every constraint and the functional at it is the value, all in fractions.',
			'Upper side: take m times (form − value) of every constraint off the functional. Where the constraints hold this only adds to it, and its local maximum, found by comparing all deterministic strategies, is the value. The check repeats a small enumeration.'
		],
		parts: []
	};
}
