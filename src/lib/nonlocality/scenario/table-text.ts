import { NotationError, NotationLimitError } from '../exact/notation-error';

export const TABLE_LIMITS = {
	characters: 500_000,
	/** 200 inputs and the margin. */
	rows: 201,
	columns: 201,
	parties: 6,
	inputs: 200,
	outputs: 64
} as const;

export type TableCell = string | number;

/**
 * Splits pasted text into cells: rows on lines, cells separated by tabs, semicolons, commas or
 * spaces; also a LaTeX array or matrix with whatever stands around it, nested brackets, rows
 * behind semicolons in one line, and tables drawn with bars and rules. @throws NotationError
 */
export function splitTable(text: string): string[][] {
	if (text.length > TABLE_LIMITS.characters)
		throw new NotationLimitError(
			`a table has at most ${TABLE_LIMITS.characters.toLocaleString('en')} characters`
		);
	const lines = rowsOf(bodyOf(text.replace(/(?<!\\)[%#].*$/gm, '')))
		.map((line) => trimText(line, ' \t\u00a0[],'))
		.filter((line) => line !== '' && !isRule(line));
	const cells = lines.map(splitRow);
	checkSize(cells);
	return cells;
}

const BEGIN = /\\begin\{([A-Za-z]{1,20})\*?\}(?:\[[a-z]\])?/g;

/** What is inside the one LaTeX environment, or the text without the marks of a display. */
function bodyOf(text: string): string {
	const begins = [...text.matchAll(BEGIN)].filter(
		([, name = '']) => !/^(?:equation|align|aligned|gather|table|center|displaymath)$/.test(name)
	);
	const [first, second] = begins;
	if (second)
		throw new NotationError('there is more than one table', second.index, 'Paste one at a time.');
	if (!first) return text.replace(/\$|(?<!\\)\\[()]|(?<!\\)\\\[|(?<!\\)\\\]/g, ' ');
	const start = first.index + first[0].length;
	const end = text.indexOf('\\end{', start);
	return text
		.slice(start, end < 0 ? undefined : end)
		.replace(/^\s*\{(?:[lcr|@! ]|\{[^{}]{0,20}\}){0,200}\}/, '')
		.replace(/\\(?:hline|cline\{[\d-]{1,9}\}|toprule|midrule|bottomrule)/g, ' ')
		.replace(/[\r\n]/g, ' ');
}

/** The text of each row. */
function rowsOf(body: string): string[] {
	const rows = body.replace(/\\\\(?:\[[^\]]{0,20}\])?|\\(?:cr|tabularnewline)(?![A-Za-z])/g, '\n');
	const list = rows.trim();
	// {{1, 2}, {3, 4}} and ((1, 2), (3, 4))
	if (/^\{\s*\{[^\\]*\}\s*\}$/.test(list) || /^\(\s*\([^()]*\)\s*,\s*\(.*\)\s*\)$/s.test(list))
		return list
			.slice(1, -1)
			.split(/[})]\s*,?\s*[{(]/)
			.map((row) => trimText(row, ' \n\t{}()'));
	const lines = rows.replace(/\][\s,]*\[/g, '\n').split(/\r?\n/);
	const [only, more] = lines.filter((line) => line.trim() !== '');
	// [1 2; 3 4]
	if (only !== undefined && more === undefined && /[^\s;,&\t][\s,&\t]+[^\s;,&\t]/.test(only))
		return trimText(only, ' []').split(';');
	return lines;
}

/** `---+---`, `|---|---|`: a line drawn between rows. */
const isRule = (line: string) => /--|==/.test(line) && /^[-=+|:\s]*$/.test(line);

function splitRow(line: string): string[] {
	const separator = ['&', '\t', ';', ','].find((mark) => line.includes(mark));
	const whole = separator ? line : line.replace(/(^|\s)([-+\u2212])\s+(?=[\d.\\])/g, '$1$2');
	return whole
		.split(separator ?? /[ \u00a0|]/)
		.map((cell) => trimText(cell, ' \t\u00a0|$'))
		.filter((cell) => separator === '&' || separator === '\t' || separator === ',' || cell !== '');
}

/** Takes the given characters off both ends; in linear time, which a regular expression is not. */
export function trimText(text: string, characters: string): string {
	let [start, end] = [0, text.length];
	while (start < end && characters.includes(text.charAt(start))) start++;
	while (end > start && characters.includes(text.charAt(end - 1))) end--;
	return text.slice(start, end);
}

/** @throws NotationError for rows of different lengths, NotationLimitError past TABLE_LIMITS. */
export function checkSize(rows: readonly (readonly TableCell[])[]): {
	height: number;
	width: number;
} {
	const height = rows.length;
	const width = rows[0]?.length ?? 0;
	if (height === 0 || width === 0) throw new NotationError('the table is empty', 0);
	if (height > TABLE_LIMITS.rows || width > TABLE_LIMITS.columns)
		throw new NotationLimitError(
			`a table has at most ${TABLE_LIMITS.rows} rows and ${TABLE_LIMITS.columns} columns, this one ${height} and ${width}`
		);
	rows.forEach((row, i) => {
		if (row.length !== width)
			throw new NotationError(
				`row ${i + 1} has ${row.length} cells, the first row ${width}`,
				null,
				'Every row has a cell for each column, zeros included.'
			);
	});
	return { height, width };
}
