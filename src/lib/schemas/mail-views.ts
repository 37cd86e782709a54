/** A mail that the local sink caught; demo and tests only. */
export interface CaughtMailView {
	readonly id: string;
	readonly at: string;
	readonly from: string;
	readonly to: string;
	readonly subject: string;
	readonly text: string;
}
