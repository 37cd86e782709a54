import { parseCoefficient } from '../../../nonlocality/exact/expression';
import {
	makeFunctional,
	scaleFunctional,
	type Functional
} from '../../../nonlocality/scenario/functional';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import { printCollinsGisin } from '../../../nonlocality/scenario/tables';
import type { MapText } from './canonical-subject';
import type { InequalityRecord } from './inequality-rows';

/** Larger tables are no help on a page; they are in the downloads. */
const LARGEST = 40;

/** The Collins-Gisin table in a normalisation; null for more than two parties. */
export function collinsGisinTableOf(row: InequalityRecord, map: MapText): string[][] | null {
	if (row.outputs.length !== 2) return null;
	const table = printCollinsGisin(functionalIn(row, map));
	return table && table.length <= LARGEST && (table[0]?.length ?? 0) <= LARGEST ? table : null;
}

/** The representative multiplied and shifted into a normalisation. */
export function functionalIn(
	{ outputs, terms }: InequalityRecord,
	{ scale, shift }: MapText
): Functional {
	const scaled = scaleFunctional(functionalOfTerms(outputs, terms), parseCoefficient(scale));
	const constant = { coefficient: parseCoefficient(shift), events: [] };
	return makeFunctional(scaled.scenario, [...scaled.terms, constant]);
}
