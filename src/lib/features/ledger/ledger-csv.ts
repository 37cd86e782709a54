import type { LedgerRow } from '../../schemas/views';

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

/** A cell by RFC 4180. */
function cell(text: string): string {
	const safe = defused(text);
	return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/**
 * A spreadsheet runs a cell that starts like a formula; a quote in front keeps it text. Numbers
 * start with a sign, too, and a lone relation sign computes nothing: both stay as they are.
 */
function defused(text: string): string {
	const plain = text.replaceAll('\0', '');
	const isNumber = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain);
	return !isNumber && plain !== '=' && /^[=+\-@\t\r]/.test(plain) ? `'${plain}` : plain;
}

/** Rows of the ledger as CSV with a heading, lines ended by CRLF. */
export function ledgerCsv(rows: readonly LedgerRow[]): string {
	const lines = [
		Object.keys(COLUMNS),
		...rows.map((row) => Object.values(COLUMNS).map((read) => read(row)))
	];
	return lines.map((cells) => `${cells.map(cell).join(',')}\r\n`).join('');
}
