import {
	COEFFICIENT_ZERO,
	addCoefficients,
	exactCoefficient,
	isZero,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from '../exact/coefficient';
import { ratio } from '../exact/rational';
import { makeFunctional, type Functional, type Term } from './functional';
import { outputCount, type Scenario } from './scenario';

/** f_S(a_S | x_S) for one set of parties S and their inputs. */
export interface ZeroSumBlock {
	/** [party, input] of each member of S, ordered by party. */
	readonly measurements: readonly (readonly [party: number, input: number])[];
	/** Outputs of each measurement. */
	readonly dimensions: readonly number[];
	/** f_S by outputs, row-major (last measurement fastest); not all zero. */
	readonly entries: readonly Coefficient[];
}

/**
 * f = constant + sum over blocks of f_S(a_S|x_S) P(a_S|x_S), where summing f_S over any one output
 * gives 0. Unique for a functional on no-signalling behaviours, and relabelling only permutes it.
 */
export interface ZeroSumForm {
	readonly scenario: Scenario;
	readonly constant: Coefficient;
	readonly blocks: readonly ZeroSumBlock[];
}

interface Table {
	readonly measurements: readonly (readonly [party: number, input: number])[];
	readonly dimensions: readonly number[];
	readonly entries: Coefficient[];
}

/**
 * Splits each table of coefficients into its mean over an output (a marginal of the other parties,
 * by no-signalling) and the rest, which sums to zero, one party after another.
 */
export function zeroSumForm(functional: Functional): ZeroSumForm {
	const { scenario } = functional;
	const sums = new Map<string, Table>();
	for (const table of tablesOf(functional)) split(table, 0, sums);
	const constant = sums.get('')?.entries[0] ?? COEFFICIENT_ZERO;
	sums.delete('');
	const blocks = [...sums.values()].filter(({ entries }) => !entries.every(isZero));
	return { scenario, constant, blocks };
}

/** The functional a zero-sum form stands for. */
export function functionalOfZeroSumForm(form: ZeroSumForm): Functional {
	const terms: Term[] = [{ coefficient: form.constant, events: [] }];
	for (const { measurements, dimensions, entries } of form.blocks) {
		entries.forEach((coefficient, index) => {
			const outputs = digitsOf(index, dimensions);
			const events = measurements.map(([p, x], k) => [p, x, outputs[k] ?? 0] as const);
			terms.push({ coefficient, events });
		});
	}
	return makeFunctional(form.scenario, terms);
}

/** Row-major digits of an index. */
export function digitsOf(index: number, dimensions: readonly number[]): number[] {
	const digits = dimensions.map(() => 0);
	for (let k = dimensions.length - 1; k >= 0; k--) {
		const dimension = dimensions[k] ?? 1;
		digits[k] = index % dimension;
		index = Math.floor(index / dimension);
	}
	return digits;
}

/** The coefficients as dense tables, one per set of measurements. */
function tablesOf(functional: Functional): Iterable<Table> {
	const tables = new Map<string, Table>();
	for (const { coefficient, events } of functional.terms) {
		const measurements = events.map(([p, x]) => [p, x] as const);
		const dimensions = events.map(([p, x]) => outputCount(functional.scenario, p, x));
		const table = tableFor(tables, measurements, dimensions);
		const index = events.reduce((i, event, k) => i * (dimensions[k] ?? 1) + event[2], 0);
		table.entries[index] = coefficient;
	}
	return tables.values();
}

function tableFor(
	tables: Map<string, Table>,
	measurements: Table['measurements'],
	dimensions: readonly number[]
): Table {
	const key = measurements.map((m) => m.join('.')).join(' ');
	let table = tables.get(key);
	if (!table) {
		const size = dimensions.reduce((product, d) => product * d, 1);
		table = { measurements, dimensions, entries: Array<Coefficient>(size).fill(COEFFICIENT_ZERO) };
		tables.set(key, table);
	}
	return table;
}

/** Adds a table to the sums; its axes before `axis` already sum to zero. */
function split(table: Table, axis: number, sums: Map<string, Table>): void {
	const { measurements, dimensions, entries } = table;
	const dimension = dimensions[axis];
	if (dimension === undefined) {
		const sum = tableFor(sums, measurements, dimensions);
		entries.forEach((entry, i) => {
			sum.entries[i] = addCoefficients(sum.entries[i] ?? COEFFICIENT_ZERO, entry);
		});
		return;
	}
	const inner = dimensions.slice(axis + 1).reduce((product, d) => product * d, 1);
	const outer = entries.length / (inner * dimension);
	const share = exactCoefficient(ratio(1n, BigInt(dimension)));
	const means: Coefficient[] = [];
	const rest = [...entries];
	for (let o = 0; o < outer; o++) {
		for (let i = 0; i < inner; i++) {
			const places = Array.from({ length: dimension }, (_, k) => (o * dimension + k) * inner + i);
			const sum = places.reduce(
				(total, place) => addCoefficients(total, entries[place] ?? COEFFICIENT_ZERO),
				COEFFICIENT_ZERO
			);
			const mean = multiplyCoefficients(sum, share);
			means.push(mean);
			const negative = negateCoefficient(mean);
			for (const place of places)
				rest[place] = addCoefficients(rest[place] ?? COEFFICIENT_ZERO, negative);
		}
	}
	const without = <T>(list: readonly T[]) => list.filter((_, k) => k !== axis);
	split(
		{ measurements: without(measurements), dimensions: without(dimensions), entries: means },
		axis,
		sums
	);
	split({ measurements, dimensions, entries: rest }, axis + 1, sums);
}
