import { NotationError } from '../../../nonlocality/exact/notation-error';
import {
	TABLE_LIMITS,
	parseProbabilities,
	splitTable,
	tableKey
} from '../../../nonlocality/scenario/tables';
import type { Event } from '../../../nonlocality/scenario/scenario';
import type { ReadTable } from './read-table';

type Outputs = readonly (readonly number[])[];

/**
 * A full probability table as coefficients of P(a,b|x,y), for any number of parties one a line
 * (`0,1|1,0  1/2`, `P(0,1|1,0) = 1/2`, or the JSON of the problem format), for two parties also as a
 * grid: rows the first party's outputs by input, columns the second's.
 * @throws NotationError naming the line, with the position of its start
 */
export function readProbabilities(text: string, outputs: Outputs | undefined): ReadTable {
	if (text.includes('|') && /\d[\s,]*\|[\s,]*\d/.test(text)) {
		const entries = readList(text);
		return {
			functional: parseProbabilities(entries, outputs),
			notation: `Full probability table, ${Object.keys(entries).length} entries listed`
		};
	}
	const rows = splitTable(text);
	return {
		functional: parseProbabilities(readGrid(rows, outputs), outputs ?? pairsOf(rows)),
		notation: `Full probability table, a grid of ${rows.length} × ${rows[0]?.length ?? 0}`
	};
}

function readList(text: string): Record<string, string> {
	const entries: Record<string, string> = {};
	let position = 0;
	for (const [number, line] of text.split('\n').entries()) {
		const entry = readLine(line, number + 1, position);
		if (entry) {
			if (entry.key in entries) {
				const message = `line ${number + 1}: P(${entry.key}) stands in the table already`;
				throw new NotationError(message, position, 'Keep one line for each probability.');
			}
			entries[entry.key] = entry.value;
		}
		position += line.length + 1;
	}
	return entries;
}

/** The marks between a probability and its coefficient. */
const BETWEEN = /^[\s)"':=;,*]*/;

function readLine(line: string, number: number, position: number) {
	if (/^[\s{}[\],]*$/.test(line)) return null;
	const [left = '', right] = splitOnce(line, '|');
	const refuse = (message: string) =>
		new NotationError(
			`line ${number}: ${message}`,
			position,
			'Write outputs, a bar, as many inputs, and the coefficient: 0,1|1,0  1/2.'
		);
	if (right === undefined) throw refuse('no probability is named');
	const outputs = left.replace(/^[^\d]*/, '').split(',');
	const inputs: string[] = [];
	let rest = right;
	for (let party = 0; party < outputs.length; party++) {
		const match = /^\s*(\d{1,3})\s*/.exec(rest);
		if (!match) throw refuse(`${outputs.length} outputs need as many inputs`);
		inputs.push(match[1] ?? '');
		rest = rest.slice(match[0].length);
		if (party < outputs.length - 1) {
			if (!rest.startsWith(',')) throw refuse(`${outputs.length} outputs need as many inputs`);
			rest = rest.slice(1);
		}
	}
	const value = trimEnd(rest.replace(BETWEEN, ''));
	if (value === '') throw refuse('the coefficient is missing');
	return { key: `${outputs.map((o) => o.trim()).join(',')}|${inputs.join(',')}`, value };
}

function splitOnce(text: string, mark: string): [string, string | undefined] {
	const at = text.indexOf(mark);
	return at < 0 ? [text, undefined] : [text.slice(0, at), text.slice(at + 1)];
}

/** Without what closes an entry of JSON. */
function trimEnd(text: string): string {
	let end = text.length;
	while (end > 0 && ' \t\r",;}'.includes(text.charAt(end - 1))) end--;
	return text.slice(0, end);
}

/** Two outputs for each input, where nothing else is said. */
function pairsOf(rows: readonly (readonly string[])[]): Outputs {
	const pairs = (length: number) => Array.from({ length: Math.floor(length / 2) }, () => 2);
	return [pairs(rows.length), pairs(rows[0]?.length ?? 0)];
}

function readGrid(
	rows: readonly (readonly string[])[],
	outputs: Outputs | undefined
): Record<string, string> {
	const [first = [], second = [], third] = outputs ?? pairsOf(rows);
	if (third) {
		const suggestion = 'Write one probability a line instead: 0,1,0|1,0,0  1/2.';
		throw new NotationError('a grid of probabilities is for two parties', null, suggestion);
	}
	const labels = (party: number, counts: readonly number[]) =>
		counts.flatMap((count, input) =>
			Array.from({ length: count }, (_, output): Event => [party, input, output])
		);
	const [down, across] = [labels(0, first), labels(1, second)];
	const width = rows[0]?.length ?? 0;
	if (rows.length !== down.length || width !== across.length || down.length * across.length === 0) {
		throw new NotationError(
			`the grid has ${rows.length} rows and ${width} columns; these outputs need ${down.length} and ${across.length}`,
			null,
			outputs
				? 'A row for each input and output of the first party, a column for each of the second.'
				: 'Give the outputs of each input where they are not two.'
		);
	}
	if (first.length > TABLE_LIMITS.inputs || second.length > TABLE_LIMITS.inputs) {
		throw new NotationError(`at most ${TABLE_LIMITS.inputs} inputs per party`, null, null);
	}
	return Object.fromEntries(
		down.flatMap((row, i) =>
			across.map((column, j) => [tableKey([row, column]), rows[i]?.[j]?.trim() || '0'])
		)
	);
}
