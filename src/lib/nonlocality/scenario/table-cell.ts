import { COEFFICIENT_ZERO, type Coefficient } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { errorWithin } from '../exact/notation-error';
import type { TableCell } from './table-text';

/** Coefficient in a cell; an empty one is zero. Rows and columns count from 1 in messages. */
export function readCell(cell: TableCell, row: number, column: number): Coefficient {
	const text = String(cell).trim();
	if (text === '') return COEFFICIENT_ZERO;
	try {
		return parseCoefficient(text);
	} catch (error) {
		throw errorWithin(`row ${row + 1}, column ${column + 1}`, error);
	}
}
