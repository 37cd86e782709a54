import {
	parseProbabilities,
	parseProbabilityTable,
	splitProbabilities,
	splitTable
} from '../../../nonlocality/notation';
import type { ReadTable } from './read-table';

/**
 * A full probability table as coefficients of P(a,b|x,y), for any number of parties one a line
 * (`0,1|1,0  1/2`, `P(0,1|1,0) = 1/2`, or the JSON of the problem format), for two parties also as a
 * grid: rows the first party's outputs by input, columns the second's.
 * @throws NotationError naming the line, with the position of its start
 */
export function readProbabilities(
	text: string,
	outputs: readonly (readonly number[])[] | undefined
): ReadTable {
	if (text.includes('|') && /\d[\s,]*\|[\s,]*\d/.test(text)) {
		const entries = splitProbabilities(text);
		return {
			functional: parseProbabilities(entries, outputs),
			notation: `Full probability table, ${Object.keys(entries).length} entries listed`
		};
	}
	const rows = splitTable(text);
	return {
		functional: parseProbabilityTable(rows, outputs),
		notation: `Full probability table, a grid of ${rows.length} × ${rows[0]?.length ?? 0}`
	};
}
