import type { Certificate, EnclosureCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';

/** @param explain the words for the certificate of either side */
export function explainEnclosure(
	{ lower, upper, upperLevel }: EnclosureCertificate,
	explain: (certificate: Certificate) => CertificateExplanation
): CertificateExplanation {
	const level = JSON.stringify(upperLevel) ?? 'none';
	return {
		kind: 'enclosure',
		title: 'Both sides, each proved on its own',
		claims: 'The quantum maximum lies between the two values.',
		fields: [
			{
				name: 'lower',
				what: 'A certificate of the lower side: an explicit strategy.',
				size: lower ? lower.kind : 'not found',
				numbers: 'none'
			},
			{
				name: 'upper',
				what: 'A certificate of the upper side: a relaxation.',
				size: upper ? upper.kind : 'not found',
				numbers: 'none'
			},
			{
				name: 'upperLevel',
				what: 'The level of that relaxation, as the problem format writes it.',
				size: level,
				numbers: 'exact'
			}
		],
		proof: ['Each side is checked as a certificate of its own; nothing of one rests on the other.'],
		parts: [
			...(lower ? [{ side: 'Lower side', ...explain(lower) }] : []),
			...(upper ? [{ side: 'Upper side', ...explain(upper) }] : [])
		]
	};
}
