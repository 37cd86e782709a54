/** Numbers of the cards in each column, from the left. */
export type BoardColumns = readonly (readonly number[])[];

/**
 * The card an arrow key leads to from another; null when there is none that way or the key is no
 * arrow. Left and right skip empty columns and keep the height as far as the column goes.
 */
export function cardBeside(columns: BoardColumns, from: number, key: string): number | null {
	const column = columns.findIndex((cards) => cards.includes(from));
	const cards = columns[column] ?? [];
	const row = cards.indexOf(from);
	if (row < 0) return null;
	switch (key) {
		case 'ArrowUp':
			return cards[row - 1] ?? null;
		case 'ArrowDown':
			return cards[row + 1] ?? null;
		case 'Home':
			return cards[0] ?? null;
		case 'End':
			return cards.at(-1) ?? null;
		case 'ArrowLeft':
			return atHeight(columns.slice(0, column).findLast(isFilled), row);
		case 'ArrowRight':
			return atHeight(columns.slice(column + 1).find(isFilled), row);
		default:
			return null;
	}
}

const isFilled = (cards: readonly number[]) => cards.length > 0;

function atHeight(cards: readonly number[] | undefined, row: number): number | null {
	return cards ? (cards[Math.min(row, cards.length - 1)] ?? null) : null;
}

/** The card that Tab reaches: the one last on, or the first there is. */
export function tabStop(columns: BoardColumns, last: number | null): number | null {
	if (last !== null && columns.some((cards) => cards.includes(last))) return last;
	return columns.find(isFilled)?.[0] ?? null;
}
