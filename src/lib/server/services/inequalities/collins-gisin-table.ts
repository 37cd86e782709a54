import { parseCoefficient } from '../../../nonlocality/exact/expression';
import { makeFunctional, scaleFunctional } from '../../../nonlocality/scenario/functional';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import { printCollinsGisin } from '../../../nonlocality/scenario/tables';
import type { MapText } from './canonical-subject';
import type { InequalityRecord } from './inequality-rows';

/** Larger tables are no help on a page; they are in the downloads. */
const LARGEST = 40;

/** The Collins-Gisin table in a normalisation; null for more than two parties. */
export function collinsGisinTableOf(
	{ outputs, terms }: InequalityRecord,
	{ scale, shift }: MapText
): string[][] | null {
	if (outputs.length !== 2) return null;
	const scaled = scaleFunctional(functionalOfTerms(outputs, terms), parseCoefficient(scale));
	const constant = { coefficient: parseCoefficient(shift), events: [] };
	const table = printCollinsGisin(makeFunctional(scaled.scenario, [...scaled.terms, constant]));
	return table && table.length <= LARGEST && (table[0]?.length ?? 0) <= LARGEST ? table : null;
}
