import type { CertificateField } from '../../../schemas/certificate-view';

/** `value` of a certificate whose two sides may meet. */
export const MAXIMUM_FIELD: CertificateField = {
	name: 'value',
	what: 'The maximum as a fraction; null where the two sides do not meet exactly.',
	size: 'one number',
	numbers: 'exact'
};
