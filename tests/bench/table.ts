export interface Column {
	readonly title: string;
	readonly align?: 'left';
}

/** A table in plain text, columns as wide as their widest cell. */
export class Table {
	readonly #columns: readonly Column[];
	readonly #widths: number[];

	/** @param widths least widths, as rows are printed one by one. */
	constructor(columns: readonly Column[], widths: readonly number[]) {
		this.#columns = columns;
		this.#widths = columns.map(({ title }, i) => Math.max(title.length, widths[i] ?? 0));
	}

	head(): string {
		const rule = this.#widths.map((width) => '-'.repeat(width)).join('  ');
		return `${this.row(this.#columns.map(({ title }) => title))}\n${rule}`;
	}

	row(cells: readonly string[]): string {
		return cells
			.map((cell, i) => {
				const width = this.#widths[i] ?? 0;
				return this.#columns[i]?.align === 'left' ? cell.padEnd(width) : cell.padStart(width);
			})
			.join('  ')
			.trimEnd();
	}
}

/** Milliseconds with three digits, or a dash. */
export function printTime(milliseconds: number | undefined): string {
	if (milliseconds === undefined || Number.isNaN(milliseconds)) return '-';
	return Number(milliseconds.toPrecision(3)).toString();
}

export function printRatio(ratio: number | undefined): string {
	return ratio === undefined || Number.isNaN(ratio) ? '-' : ratio.toFixed(2);
}
