/** One thing wrong with one field, as shown beside it. */
export interface FieldIssueView {
	readonly field: string;
	readonly message: string;
	/** Zero-based position in the field's text, where it is known. */
	readonly position?: number;
}
