import type { LinearProgrammeCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { entries } from './counted';
import { MAXIMUM_FIELD } from './maximum-field';

export function explainLinearProgramme({
	primal,
	dual
}: LinearProgrammeCertificate): CertificateExplanation {
	return {
		kind: 'linear-programme',
		title: 'Primal and dual solution of a linear programme',
		claims:
			'The box reaches the value and the multipliers allow no more, so that it is the maximum over all no-signalling boxes.',
		fields: [
			{
				name: 'primal',
				what: 'A box: the probability P(a,b|x,y) under the key "a,b|x,y"; those left out are 0.',
				size: entries(primal),
				numbers: 'exact'
			},
			{
				name: 'dual',
				what: 'A multiplier m ≥ 0 for each row P(a,b|x,y) ≥ 0 under its key, and of constraints under theirs; those left out are 0.',
				size: entries(dual),
				numbers: 'exact'
			},
			MAXIMUM_FIELD
		],
		proof: [
			'Lower side: the entries of the box are at least 0, sum to 1 for every choice of inputs, and its marginals are independent of the other inputs; the functional at it is the value. All of it in fractions.',
			'Upper side: write the functional plus the sum of m P in Collins-Gisin coordinates y, each of which is a probability. What is left is a constant U and a rest r·y; since m P ≥ 0 the functional is at most U plus the positive entries of r.'
		],
		parts: []
	};
}
