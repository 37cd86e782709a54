import { NotationError, NotationLimitError } from '../exact/notation-error';
import { makeFunctional, eventsKey, type Functional, type Term } from './functional';
import type { Event, Scenario } from './scenario';
import { readCell } from './table-cell';
import { TABLE_LIMITS, checkSize, trimText, type TableCell } from './table-text';

/** The events that label rows or columns: every output of every input, in order. */
function labels(party: number, outputs: readonly number[]): Event[] {
	return outputs.flatMap((count, input) =>
		Array.from({ length: count }, (_, output): Event => [party, input, output])
	);
}

/**
 * A functional of two parties as the table of the coefficients of all its probabilities: rows party
 * 0, columns party 1, both by (input, output) with no output left out.
 * @param outputs the scenario; left out, every input has two outputs.
 * @throws NotationError naming row and column.
 */
export function parseProbabilityTable(
	rows: readonly (readonly TableCell[])[],
	outputs?: readonly (readonly number[])[]
): Functional {
	const { height, width } = checkSize(rows);
	if (!outputs && (height % 2 !== 0 || width % 2 !== 0))
		throw new NotationError(
			`the table has ${height} rows and ${width} columns, and inputs of two outputs need even numbers`,
			null,
			'Give the outputs of each input.'
		);
	const two = (length: number) => Array.from({ length }, () => 2);
	const scenario: Scenario = { outputs: outputs ?? [two(height / 2), two(width / 2)] };
	if (scenario.outputs.length !== 2)
		throw new NotationError(
			`a table of probabilities has rows and columns for two parties, not ${scenario.outputs.length}`,
			null,
			'Write the probabilities on lines: 0,1|1,0: 1/2.'
		);
	const above = labels(0, scenario.outputs[0] ?? []);
	const across = labels(1, scenario.outputs[1] ?? []);
	if (height !== above.length || width !== across.length)
		throw new NotationError(
			`the table has ${height} rows and ${width} columns; these outputs need ${above.length} and ${across.length}`,
			null,
			'Every output of every input has a row or column.'
		);
	const terms = rows.flatMap((row, i) =>
		row.map((cell, j): Term => {
			const events = [above[i], across[j]].filter((event) => event !== undefined);
			return { coefficient: readCell(cell, i, j), events };
		})
	);
	return makeFunctional(scenario, terms);
}

/** That table of a two-party functional without marginals and constant; null for others. */
export function printProbabilityTable({ scenario, terms }: Functional): string[][] | null {
	const [first, second, third] = scenario.outputs;
	if (!first || !second || third || terms.some(({ events }) => events.length !== 2)) return null;
	const entries = new Map(terms.map((t) => [eventsKey(t.events), t.coefficient.text]));
	return labels(0, first).map((row) =>
		labels(1, second).map((column) => entries.get(eventsKey([row, column])) ?? '0')
	);
}

const LINE =
	/^\s*(?:[Pp]\s*\(\s*)?"?(\d+(?:\s*,\s*\d+)*)\s*\|\s*(\d+(?:\s*,\s*\d+)*)"?\s*\)?(?:\s*[:=]\s*|\s+)(\S[^]*)$/;

/**
 * Probabilities written on lines of their own: `0,1|1,0: 1/2`, `P(0,1|1,0) = 1/2`, `01|10 0.5`; or
 * as the JSON object they are in a problem. The keys are those of parseProbabilities.
 * @throws NotationError naming the line, NotationLimitError past TABLE_LIMITS.characters.
 */
export function splitProbabilities(text: string): Record<string, string> {
	if (text.length > TABLE_LIMITS.characters)
		throw new NotationLimitError(
			`a table has at most ${TABLE_LIMITS.characters.toLocaleString('en')} characters`
		);
	const entries = new Map<string, string>();
	let start = 0;
	for (const [number, whole] of text.split('\n').entries()) {
		const position = start;
		start += whole.length + 1;
		// Braces, quotes and commas are those of JSON.
		const line = trimText(whole, ' \t\r\u00a0{},;');
		if (line === '') continue;
		for (const piece of line.split(/,\s*(?=")/)) {
			const [, outputs = '', inputs = '', value = ''] = LINE.exec(piece.trim()) ?? [];
			if (value === '')
				throw new NotationError(
					`line ${number + 1} is no probability with its coefficient`,
					position,
					'Write 0,1|1,0: 1/2.'
				);
			const key = `${commas(outputs)}|${commas(inputs)}`;
			if (entries.has(key))
				throw new NotationError(`line ${number + 1}: ${key} occurs twice`, position);
			entries.set(key, value.replace(/^"([^"]*)"$/, '$1').trim());
		}
	}
	if (entries.size === 0) throw new NotationError('the table of probabilities is empty', 0);
	return Object.fromEntries(entries);
}

/** `0, 1` and `01` as `0,1`. */
function commas(indices: string): string {
	const list = indices.includes(',') ? indices.split(',') : [...indices];
	return list.map((index) => index.trim()).join(',');
}
