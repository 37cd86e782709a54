import {
	ONE,
	ZERO,
	parseRational,
	printRational,
	toDouble,
	type Rational
} from '../exact/rational';
import type { Event, Scenario } from './scenario';

/** All probabilities of a scenario as exact rationals; those not listed are 0. */
export interface ExactTable {
	readonly scenario: Scenario;
	/** By `"a,b|x,y"`: outputs and inputs of all parties, in order. */
	readonly probabilities: ReadonlyMap<string, Rational>;
}

/** Entries of a table looked at: `outputs,...|inputs,...` of every party. */
export const TABLE_LIMIT = 100_000;

export function tableKey(outputs: readonly number[], inputs: readonly number[]): string {
	return `${outputs.join(',')}|${inputs.join(',')}`;
}

/** Number of entries of a full table. */
export function tableSize(scenario: Scenario): number {
	return scenario.outputs.reduce(
		(product, counts) => product * counts.reduce((sum, count) => sum + count, 0),
		1
	);
}

/** Reads the entries (exact fractions, unless told otherwise), or says what is wrong with one. */
export function readTable(
	scenario: Scenario,
	entries: Readonly<Record<string, string>>,
	read: (text: string) => Rational | null = parseRational
): ExactTable | string {
	if (tableSize(scenario) > TABLE_LIMIT)
		return `a table of ${tableSize(scenario)} entries is past the limit of ${TABLE_LIMIT}`;
	const known = new Set<string>();
	forEachTuple(scenario, (inputs) =>
		forEachOutputs(scenario, inputs, (outputs) => known.add(tableKey(outputs, inputs)))
	);
	const probabilities = new Map<string, Rational>();
	for (const [key, text] of Object.entries(entries)) {
		if (!known.has(key)) return `"${key}" names no probability of this scenario`;
		const value = read(text);
		if (!value) return `P(${key}) = "${text}" is no fraction`;
		probabilities.set(key, value);
	}
	return { scenario, probabilities };
}

/**
 * The first defect of a table as a no-signalling behaviour, in words; null when it is one, up to
 * the tolerance (0: exactly).
 */
export function tableDefect(table: ExactTable, tolerance: Rational = ZERO): string | null {
	const exact = tolerance.n === 0n;
	const print = (value: Rational) => (exact ? printRational(value) : String(toDouble(value)));
	const same = (a: Rational, b: Rational) => a.sub(b).abs().compare(tolerance) <= 0;
	for (const [key, value] of table.probabilities) {
		if (value.add(tolerance).compare(0) < 0) return `P(${key}) = ${print(value)} is negative`;
	}
	const { scenario } = table;
	let defect: string | null = null;
	forEachTuple(scenario, (inputs) => {
		if (defect) return;
		const sum = marginal(table, inputs, []);
		if (!same(sum, ONE))
			defect = `the probabilities at inputs ${inputs.join(',')} sum to ${print(sum)}, not 1`;
	});
	return defect ?? signallingDefect(table, same, print);
}

/** Each party's input may not show in the joint distribution of the others. */
function signallingDefect(
	table: ExactTable,
	same: (a: Rational, b: Rational) => boolean,
	print: (value: Rational) => string
): string | null {
	const { scenario } = table;
	let defect: string | null = null;
	for (const party of scenario.outputs.keys()) {
		forEachTuple(scenario, (inputs) => {
			if (defect || inputs[party] === 0) return;
			const reference = inputs.map((x, p) => (p === party ? 0 : x));
			forEachOutputs(scenario, inputs, (outputs) => {
				if (defect || outputs[party] !== 0) return;
				const events = outputs.flatMap((a, p): Event[] =>
					p === party ? [] : [[p, inputs[p] ?? 0, a]]
				);
				const [here, there] = [marginal(table, inputs, events), marginal(table, reference, events)];
				if (!same(here, there))
					defect =
						`signalling: with input ${inputs[party]} instead of 0 of party ${party}, ` +
						`the others' probability changes from ${print(there)} to ${print(here)}`;
			});
		});
	}
	return defect;
}

/** P(events), with input 0 for the parties that are not named. */
export function marginalOf(table: ExactTable, events: readonly Event[]): Rational {
	const inputs = table.scenario.outputs.map((_, p) => events.find(([q]) => q === p)?.[1] ?? 0);
	return marginal(table, inputs, events);
}

/** Sum over the outputs of the parties without an event, at the given inputs. */
function marginal(
	table: ExactTable,
	inputs: readonly number[],
	events: readonly Event[]
): Rational {
	let sum = ZERO;
	const fixed = inputs.map((_, p) => events.find(([q]) => q === p)?.[2] ?? null);
	forEachOutputs(
		table.scenario,
		inputs,
		(outputs) => {
			const value = table.probabilities.get(tableKey(outputs, inputs));
			if (value) sum = sum.add(value);
		},
		fixed
	);
	return sum;
}

/** All input tuples; the array is reused. */
function forEachTuple(scenario: Scenario, visit: (inputs: readonly number[]) => void): void {
	forEachDigits(
		scenario.outputs.map((counts) => counts.length),
		visit
	);
}

function forEachOutputs(
	scenario: Scenario,
	inputs: readonly number[],
	visit: (outputs: readonly number[]) => void,
	fixed: readonly (number | null)[] = []
): void {
	const counts = inputs.map((x, p) => (fixed[p] == null ? (scenario.outputs[p]?.[x] ?? 0) : 1));
	forEachDigits(counts, (digits) => visit(digits.map((digit, p) => fixed[p] ?? digit)));
}

function forEachDigits(
	counts: readonly number[],
	visit: (digits: readonly number[]) => void
): void {
	const digits = counts.map(() => 0);
	for (;;) {
		visit(digits);
		let k = digits.length - 1;
		while (k >= 0 && (digits[k] ?? 0) + 1 >= (counts[k] ?? 1)) digits[k--] = 0;
		if (k < 0) return;
		digits[k] = (digits[k] ?? 0) + 1;
	}
}

/** Keys of the entries that sum to P(events), with input 0 for the parties that are not named. */
export function marginalEntries(scenario: Scenario, events: readonly Event[]): string[] {
	const inputs = scenario.outputs.map((_, p) => events.find(([q]) => q === p)?.[1] ?? 0);
	const fixed = inputs.map((_, p) => events.find(([q]) => q === p)?.[2] ?? null);
	const keys: string[] = [];
	forEachOutputs(scenario, inputs, (outputs) => keys.push(tableKey(outputs, inputs)), fixed);
	return keys;
}
