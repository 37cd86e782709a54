import type { Certificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { explainEnclosure } from './explain-enclosure';
import { explainLinearProgramme } from './explain-linear-programme';
import { explainFacet } from './explain-facet';
import { explainHybrid } from './explain-hybrid';
import { explainLocalMixture } from './explain-local-mixture';
import { explainExactMoments, explainMoments } from './explain-moments';
import { explainQuantumStrategy } from './explain-quantum-strategy';
import { explainStrategy } from './explain-strategy';

/** A certificate in words; a kind without its own words does not compile. */
export function explainCertificate(certificate: Certificate): CertificateExplanation {
	switch (certificate.kind) {
		case 'deterministic-strategy':
			return explainStrategy(certificate);
		case 'linear-programme':
			return explainLinearProgramme(certificate);
		case 'npa-dual':
			return explainMoments(certificate);
		case 'npa-exact':
			return explainExactMoments(certificate);
		case 'local-mixture':
			return explainLocalMixture(certificate);
		case 'hybrid':
			return explainHybrid(certificate);
		case 'facet':
			return explainFacet(certificate);
		case 'quantum-strategy':
			return explainQuantumStrategy(certificate);
		case 'enclosure':
			return explainEnclosure(certificate, explainCertificate);
	}
}
