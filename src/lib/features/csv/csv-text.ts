/** Rows of cells as CSV by RFC 4180, lines ended by CRLF, safe to open in a spreadsheet. */
export function csvText(rows: readonly (readonly string[])[]): string {
	return rows.map((cells) => `${cells.map(cell).join(',')}\r\n`).join('');
}

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
