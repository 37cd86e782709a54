import { withMinusSign } from '../../ledger/figures';
import type { LedgerRow } from '../../schemas/views';
import { beforePoint } from '../digits/shown-between';
import { recomputedShown } from './recomputed-shown';

/** A relation's sign and the space after it. */
const SIGN = 2;

/** Characters in front of the point of a claimed figure with its sign; null where it has no point. */
export function claimedBefore(
	row: Pick<LedgerRow, 'printed' | 'printedHtml' | 'relation'>
): number | null {
	if (row.printedHtml !== null) return null;
	const before = beforePoint(withMinusSign(row.printed.trim()));
	return before === null ? null : before + (row.relation === '=' ? 0 : SIGN);
}

/** The same of what was recomputed. */
export function recomputedBefore({ printed, verdict }: LedgerRow): number | null {
	const shown = recomputedShown(printed, verdict);
	if (!shown) return null;
	const before = beforePoint(shown.main.map((run) => run.text).join(''));
	return before === null ? null : before + (shown.sign === null ? 0 : SIGN);
}

const widest = (widths: readonly (number | null)[]) =>
	widths.reduce<number>((most, width) => Math.max(most, width ?? 0), 0);

/** How far the figures of a table's columns reach in front of the point. */
export function alignment(rows: readonly LedgerRow[]): { claimed: number; recomputed: number } {
	return {
		claimed: widest(rows.map(claimedBefore)),
		recomputed: widest(rows.map(recomputedBefore))
	};
}
