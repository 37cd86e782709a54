/** One field of a certificate, for a reader who may write a check of their own. */
export interface CertificateField {
	/** As in the JSON. */
	readonly name: string;
	readonly what: string;
	/** `9 × 9, lower triangle: 45 numbers`. */
	readonly size: string;
	readonly numbers: 'exact' | 'floating point' | 'none';
}

/** A certificate in words, whatever its kind. */
export interface CertificateExplanation {
	/** `kind` in the JSON. */
	readonly kind: string;
	readonly title: string;
	/** What is claimed by it. */
	readonly claims: string;
	readonly fields: readonly CertificateField[];
	/** How the fields prove it, step by step. */
	readonly proof: readonly string[];
	/** Certificates that stand inside this one, each on its own. */
	readonly parts: readonly (CertificateExplanation & { readonly side: string })[];
}

/** The page of a recomputation's certificate. */
export interface CertificateView {
	readonly id: string;
	/** `NPA level 2`. */
	readonly label: string;
	/** `the bound of NPA level 2`: the quantity that it bounds. */
	readonly quantity: string;
	readonly formulaHtml: string | null;
	readonly formula: string;
	/** In the normalisation of its own problem: `at least 2 and at most 3`. */
	readonly proves: string;
	readonly checked: boolean;
	readonly method: string;
	readonly solver: string;
	readonly bytes: number;
	readonly hasSdpa: boolean;
	/** Null where there is no certificate: the value of a box is evaluated again. */
	readonly explanation: CertificateExplanation | null;
}
