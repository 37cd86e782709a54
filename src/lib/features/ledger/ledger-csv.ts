import type { LedgerRow } from '../../schemas/views';
import { csvText } from '../csv/csv-text';

const COLUMNS = {
	number: (row: LedgerRow) => String(row.number),
	status: (row) => row.verdict.status,
	quantity: (row) => row.quantityLabel,
	inequality: (row) => row.subject.text,
	scenario: (row) => row.subject.scenario,
	relation: (row) => row.relation,
	claimed: (row) => row.printed,
	claimed_low: (row) => row.verdict.reading.low,
	claimed_high: (row) => row.verdict.reading.high,
	recomputed_lower: (row) => row.verdict.enclosure?.lower ?? '',
	recomputed_upper: (row) => row.verdict.enclosure?.upper ?? '',
	recomputed_exact: (row) => row.verdict.enclosure?.exact ?? '',
	worth: (row) => row.verdict.enclosure?.worth ?? '',
	recomputed_by: (row) => row.recomputedBy,
	reason: (row) => row.verdict.reason,
	reference: (row) => row.reference.short,
	doi: (row) => row.reference.doi ?? '',
	locator: (row) => row.reference.locator,
	state: (row) => row.state,
	visibility: (row) => row.visibility
} satisfies Readonly<Record<string, (row: LedgerRow) => string>>;

/** Rows of the ledger as CSV with a heading, lines ended by CRLF. */
export function ledgerCsv(rows: readonly LedgerRow[]): string {
	const lines = [
		Object.keys(COLUMNS),
		...rows.map((row) => Object.values(COLUMNS).map((read) => read(row)))
	];
	return csvText(lines);
}
