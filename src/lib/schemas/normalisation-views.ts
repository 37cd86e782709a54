/** A claim's own normalisation beside the reader's: how the two are told into one another. */
export interface ClaimNormalisationView {
	readonly claimId: string;
	/** Value of the URL parameter that shows everything as this claim has it. */
	readonly key: string;
	/** `Arden & Voss 2004, eq. (7)`. */
	readonly source: string;
	readonly quantityLabel: string;
	/** `2.8284`, as printed. */
	readonly printed: string;
	/** The value typeset, where it is printed in LaTeX. */
	readonly printedHtml: string | null;
	/** `≤`, `=` or `≥`. */
	readonly sign: string;
	/** `4 × it + 2`: its values from those shown on the page; null: they are the same. */
	readonly map: string | null;
	/** What it claims in the reader's normalisation: `= 0.20706 … 0.20712`; null: too long a number. */
	readonly here: string | null;
}
