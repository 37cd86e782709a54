import { SolverStop, type ProblemConstraint } from '../problem';
import { eventsKey } from '../scenario/functional';
import type { Event, Scenario } from '../scenario/scenario';
import { integerConstraints } from './integer-constraints';

/**
 * A row P(a|x) >= 0, or a constraint, in Collins-Gisin coordinates: constant + sum of
 * value * y >= 0, in integers.
 */
export interface PolytopeRow {
	/** `"a,b|x,y"`, or `constraint 0 >=` (form - value >= 0), `constraint 0 <=` (the reverse). */
	readonly key: string;
	readonly constant: number;
	readonly entries: readonly (readonly [column: number, value: number])[];
	/** The row is this many times what its key says; 1 for probabilities. */
	readonly scale: bigint;
}

export interface NoSignallingRows {
	/** Events of each coordinate y. */
	readonly columns: readonly (readonly Event[])[];
	/** Column by `eventsKey`. */
	readonly columnOf: ReadonlyMap<string, number>;
	/** Probabilities first, then constraints. */
	readonly rows: readonly PolytopeRow[];
	readonly probabilityCount: number;
}

/** Rows of the programme, and entries in all of them: some minutes of simplex beyond. */
const ROW_LIMIT = 20_000;
export const ENTRY_LIMIT = 1_000_000;

/** @throws SolverStop `limit` naming the figure. */
export function noSignallingRows(scenario: Scenario): NoSignallingRows {
	const parties = scenario.outputs.map((counts, p) => partyRows(counts, p));
	const product = (size: (p: PartyRows) => number) =>
		parties.reduce((total, p) => total * size(p), 1);
	const rowCount = product((p) => p.length);
	const entryCount = product((p) => p.reduce((sum, row) => sum + row.parts.length, 0));
	if (rowCount > ROW_LIMIT)
		throw new SolverStop(
			'limit',
			`the no-signalling polytope has ${rowCount} inequalities, more than the limit of ${ROW_LIMIT}`
		);
	if (entryCount > ENTRY_LIMIT)
		throw new SolverStop(
			'limit',
			`the linear programme has ${entryCount} entries, more than the limit of ${ENTRY_LIMIT}`
		);
	let columns: (readonly Event[])[] = [[]];
	for (const [p, counts] of scenario.outputs.entries()) {
		const own = counts.flatMap((count, x) =>
			Array.from({ length: count - 1 }, (_, a): Event => [p, x, a])
		);
		columns = columns.flatMap((list) => [list, ...own.map((event) => [...list, event])]);
	}
	columns = columns.slice(1); // without the constant
	const columnOf = new Map(columns.map((events, i) => [eventsKey(events), i]));
	const rows = combine(parties, columnOf);
	return { columns, columnOf, rows, probabilityCount: rows.length };
}

/** One party's P(a|x) as a sum of sign * (its event, or nothing). */
type PartyRows = readonly {
	readonly input: number;
	readonly output: number;
	readonly parts: readonly (readonly [event: Event | null, sign: 1 | -1])[];
}[];

function partyRows(counts: readonly number[], party: number): PartyRows {
	return counts.flatMap((count, input) =>
		Array.from({ length: count }, (_, output) => {
			const event = (a: number): Event => [party, input, a];
			if (output < count - 1) return { input, output, parts: [[event(output), 1] as const] };
			const others = Array.from({ length: count - 1 }, (_, a) => [event(a), -1] as const);
			return { input, output, parts: [[null, 1] as const, ...others] };
		})
	);
}

function combine(
	parties: readonly PartyRows[],
	columnOf: ReadonlyMap<string, number>
): PolytopeRow[] {
	interface Partial {
		readonly inputs: readonly number[];
		readonly outputs: readonly number[];
		readonly parts: readonly (readonly [events: readonly Event[], sign: 1 | -1])[];
	}
	let partials: Partial[] = [{ inputs: [], outputs: [], parts: [[[], 1]] }];
	for (const party of parties) {
		partials = partials.flatMap((partial) =>
			party.map(({ input, output, parts }) => ({
				inputs: [...partial.inputs, input],
				outputs: [...partial.outputs, output],
				parts: partial.parts.flatMap(([events, sign]) =>
					parts.map(
						([event, other]) =>
							[event ? [...events, event] : events, sign === other ? 1 : -1] as const
					)
				)
			}))
		);
	}
	return partials.map(({ inputs, outputs, parts }) => {
		let constant = 0;
		const entries: [number, number][] = [];
		for (const [events, sign] of parts) {
			const column = columnOf.get(eventsKey(events));
			if (column === undefined)
				constant = 1; // no event: all outputs are the last ones
			else entries.push([column, sign]);
		}
		return { key: `${outputs.join(',')}|${inputs.join(',')}`, constant, entries, scale: 1n };
	});
}

/**
 * Adds the problem's linear constraints as rows, an equality as two.
 * @throws SolverStop `failed` for an irrational constraint or one with very long coefficients
 */
export function withConstraints(
	polytope: NoSignallingRows,
	scenario: Scenario,
	constraints: readonly ProblemConstraint[]
): NoSignallingRows {
	const rows = integerConstraints(scenario, constraints).flatMap(
		({ relation, integers }, index) => {
			const sides = relation === '=' ? (['>=', '<='] as const) : [relation];
			return sides.map((side): PolytopeRow => {
				const sign = side === '>=' ? 1 : -1;
				let constant = 0;
				const entries: [number, number][] = [];
				for (const { coefficient, events } of integers.terms) {
					const column = polytope.columnOf.get(eventsKey(events));
					if (column === undefined) constant = sign * Number(coefficient);
					else entries.push([column, sign * Number(coefficient)]);
				}
				const scale = integers.denominator;
				return { key: `constraint ${index} ${side}`, constant, entries, scale };
			});
		}
	);
	return { ...polytope, rows: [...polytope.rows, ...rows] };
}
