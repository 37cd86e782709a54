import { NotationError } from '../../../nonlocality/exact/notation-error';
import type { Functional } from '../../../nonlocality/scenario/functional';
import {
	TABLE_LIMITS,
	parseCollinsGisin,
	parseCorrelators,
	splitTable
} from '../../../nonlocality/scenario/tables';

import type { ClaimInput } from '../../../schemas/claim-input';
import type { FieldIssue } from '../../errors';
import { readProbabilities } from './read-probabilities';

/** `2 2 / 3 3`: outputs of each input, parties separated by a slash (or on lines of their own). */
export function readOutputs(text: string): readonly (readonly number[])[] | FieldIssue {
	const wrong = (message: string): FieldIssue => ({ field: 'outputs', message });
	const parties = text
		.split(/[/\n|]/)
		.map((party) => party.trim())
		.filter(Boolean)
		.map((party) => party.split(/[\s,;]+/).filter(Boolean));
	if (parties.flat().some((count) => !/^\d{1,3}$/.test(count) || Number(count) < 2)) {
		return wrong('Write the outputs of each input as numbers from 2 up, for instance 2 2 / 3 3.');
	}
	if (parties.length > TABLE_LIMITS.parties) {
		return wrong(`At most ${TABLE_LIMITS.parties} parties.`);
	}
	if (parties.some((party) => party.length > TABLE_LIMITS.inputs)) {
		return wrong(`At most ${TABLE_LIMITS.inputs} inputs per party.`);
	}
	return parties.map((party) => party.map(Number));
}

/** A table's functional, and the notation it was read in. */
export interface ReadTable {
	readonly functional: Functional;
	readonly notation: string;
}

/** @throws NotationError naming row and column, or the line */
export function readTable(input: ClaimInput): ReadTable | FieldIssue {
	const { table, subjectKind } = input;
	if (!table.trim())
		throw new NotationError('the table is empty', null, 'Paste its rows on lines.');
	if (subjectKind === 'correlators') {
		const rows = splitTable(table);
		return { functional: parseCorrelators(rows), notation: `Correlator table, ${sizeOf(rows)}` };
	}
	const outputs = input.outputs.trim() ? readOutputs(input.outputs) : undefined;
	if (outputs && 'field' in outputs) return outputs;
	if (subjectKind === 'probabilities') return readProbabilities(table, outputs);
	const rows = splitTable(table);
	const functional = parseCollinsGisin(rows, outputs);
	return { functional, notation: `Collins-Gisin table, ${sizeOf(rows)}` };
}

/** Rows and columns without the margins. */
const sizeOf = (rows: readonly (readonly string[])[]) =>
	`${rows.length - 1} × ${(rows[0]?.length ?? 1) - 1} and its margins`;
