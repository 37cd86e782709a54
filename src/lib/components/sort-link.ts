/** How a table is sorted by a column, and where a click on its heading leads. */
export interface SortLink {
	readonly href: string;
	/** What the column is sorted by now. */
	readonly direction: 'ascending' | 'descending' | null;
	/** What a click does, for a screen reader. */
	readonly action: string;
}
