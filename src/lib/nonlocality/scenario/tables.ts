import { isZero } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { NotationError, errorWithin, NotationLimitError } from '../exact/notation-error';
import { observableTerms } from './expression-print';
import {
	collinsGisinForm,
	eventsKey,
	makeFunctional,
	type Functional,
	type Term
} from './functional';
import { correlatorTerms, type Observable } from './observables';
import type { Event, Scenario } from './scenario';
import { readCell } from './table-cell';
import { TABLE_LIMITS, checkSize, type TableCell } from './table-text';

export { TABLE_LIMITS, splitTable, type TableCell } from './table-text';

/** The events that label the rows or columns of a Collins-Gisin table, after the marginal. */
function labels(party: number, outputs: readonly number[]): Event[] {
	return outputs.flatMap((count, input) =>
		Array.from({ length: count - 1 }, (_, output): Event => [party, input, output])
	);
}

/**
 * A Collins-Gisin table: rows party 0, columns party 1, ordered by (input, output) with the last
 * output of each input omitted; first row and column the marginals, [0][0] the constant.
 * @param outputs the scenario; left out, every input has two outputs.
 * @throws NotationError naming row and column.
 */
export function parseCollinsGisin(
	rows: readonly (readonly TableCell[])[],
	outputs?: readonly (readonly number[])[]
): Functional {
	const { height, width } = checkSize(rows);
	const two = (length: number) => Array.from({ length }, () => 2);
	if (!outputs && (height < 2 || width < 2))
		throw new NotationError('the table needs at least two rows and two columns', null, MARGINS);
	const scenario: Scenario = { outputs: outputs ?? [two(height - 1), two(width - 1)] };
	if (scenario.outputs.length !== 2)
		throw new NotationError(
			`a Collins-Gisin table is for two parties, not ${scenario.outputs.length}`
		);
	const above = labels(0, scenario.outputs[0] ?? []);
	const across = labels(1, scenario.outputs[1] ?? []);
	if (height !== above.length + 1 || width !== across.length + 1)
		throw new NotationError(
			`the table has ${height} rows and ${width} columns; these outputs need ${above.length + 1} and ${across.length + 1}`,
			null,
			MARGINS
		);
	const terms = rows.flatMap((row, i) =>
		row.map((cell, j): Term => {
			const events = [above[i - 1], across[j - 1]].filter((event) => event !== undefined);
			return { coefficient: readCell(cell, i, j), events };
		})
	);
	return makeFunctional(scenario, terms);
}

const MARGINS =
	'The first row and column hold the marginals, the corner the constant (0 where there is none).';

/** The Collins-Gisin table of a two-party functional, exact entries as text; null for others. */
export function printCollinsGisin(functional: Functional): string[][] | null {
	const [first, second, third] = functional.scenario.outputs;
	if (!first || !second || third) return null;
	const entries = new Map(
		collinsGisinForm(functional).terms.map((t) => [eventsKey(t.events), t.coefficient.text])
	);
	const rows: (Event | null)[] = [null, ...labels(0, first)];
	const columns: (Event | null)[] = [null, ...labels(1, second)];
	return rows.map((row) =>
		columns.map((column) => {
			const events = [row, column].filter((event) => event !== null);
			return entries.get(eventsKey(events)) ?? '0';
		})
	);
}

/**
 * A table of correlators, two parties with two outputs everywhere: rows A_x, columns B_y, first row
 * and column the marginals, [0][0] the constant. @throws NotationError naming row and column.
 */
export function parseCorrelators(rows: readonly (readonly TableCell[])[]): Functional {
	const { height, width } = checkSize(rows);
	if (height < 2 || width < 2)
		throw new NotationError('the table needs at least two rows and two columns', null, MARGINS);
	const two = (length: number) => Array.from({ length }, () => 2);
	const terms = rows.flatMap((row, i) =>
		row.flatMap((cell, j) => {
			const observables: Observable[] = [];
			if (i > 0) observables.push([0, i - 1]);
			if (j > 0) observables.push([1, j - 1]);
			return correlatorTerms(readCell(cell, i, j), observables);
		})
	);
	return makeFunctional({ outputs: [two(height - 1), two(width - 1)] }, terms);
}

/** The correlator table of a functional, or null unless it has two parties and two outputs everywhere. */
export function printCorrelators(functional: Functional): string[][] | null {
	const [first, second, third] = functional.scenario.outputs;
	if (!first || !second || third || [...first, ...second].some((count) => count !== 2)) return null;
	const table = [null, ...first].map(() => [null, ...second].map(() => '0'));
	for (const { coefficient, observables } of observableTerms(functional)) {
		const row = observables.find(([party]) => party === 0)?.[1] ?? -1;
		const column = observables.find(([party]) => party === 1)?.[1] ?? -1;
		table[row + 1]?.splice(column + 1, 1, coefficient.text);
	}
	return table;
}

const TABLE_KEY = /^\d{1,3}(,\d{1,3})*\|\d{1,3}(,\d{1,3})*$/;

/** The events of a key `a,b|x,y`. @throws NotationError when it is none. */
export function parseTableKey(key: string): Event[] {
	const [outputs, inputs] = (TABLE_KEY.test(key) ? key.split('|') : []).map((side) =>
		side.split(',').map(Number)
	);
	if (!outputs || !inputs || outputs.length !== inputs.length)
		throw new NotationError(
			`${JSON.stringify(key.slice(0, 40))} names no probability`,
			null,
			'Write outputs, a bar and as many inputs: "0,1|1,0".'
		);
	return outputs.map((output, party): Event => [party, inputs[party] ?? 0, output]);
}

/** The key `a,b|x,y` of the events of all parties. */
export function tableKey(events: readonly Event[]): string {
	return `${events.map((event) => event[2]).join(',')}|${events.map((event) => event[1]).join(',')}`;
}

/** The smallest scenario that contains every key of a table. @throws NotationError, NotationLimitError */
export function scenarioOfKeys(keys: Iterable<string>): Scenario {
	const outputs: number[][] = [];
	let parties = 0;
	for (const key of keys) {
		const events = parseTableKey(key);
		if (parties !== 0 && events.length !== parties)
			throw new NotationError(
				`${JSON.stringify(key)} is for ${events.length} parties, the others for ${parties}`
			);
		parties = events.length;
		if (parties > TABLE_LIMITS.parties)
			throw new NotationLimitError(`at most ${TABLE_LIMITS.parties} parties, not ${parties}`);
		for (const [party, input, output] of events) {
			if (input >= TABLE_LIMITS.inputs || output >= TABLE_LIMITS.outputs)
				throw new NotationLimitError(
					`at most ${TABLE_LIMITS.inputs} inputs and ${TABLE_LIMITS.outputs} outputs, not ${JSON.stringify(key)}`
				);
			const row = (outputs[party] ??= []);
			while (row.length <= input) row.push(2);
			row[input] = Math.max(row[input] ?? 2, output + 1);
		}
	}
	if (parties === 0) throw new NotationError('the table of probabilities is empty');
	return { outputs };
}

/**
 * A functional as coefficients of full probabilities, `{ "a,b|x,y": coefficient }`.
 * @throws NotationError naming the key.
 */
export function parseProbabilities(
	entries: Readonly<Record<string, TableCell>>,
	outputs?: readonly (readonly number[])[]
): Functional {
	const scenario = outputs ? { outputs } : scenarioOfKeys(Object.keys(entries));
	const terms = Object.entries(entries).map(([key, value]): Term => {
		const events = parseTableKey(key);
		if (events.length !== scenario.outputs.length)
			throw new NotationError(
				`${JSON.stringify(key)} is for ${events.length} parties, not ${scenario.outputs.length}`
			);
		const outside = events.find(([p, x, a]) => a >= (scenario.outputs[p]?.[x] ?? 0));
		if (outside) throw new NotationError(`${JSON.stringify(key)} is outside the scenario`);
		try {
			return { coefficient: parseCoefficient(String(value)), events };
		} catch (error) {
			throw errorWithin(JSON.stringify(key), error);
		}
	});
	return makeFunctional(scenario, terms);
}

/** The coefficients of the full probabilities of a functional without marginals, else null. */
export function printProbabilities(functional: Functional): Record<string, string> | null {
	const parties = functional.scenario.outputs.length;
	if (functional.terms.some((t) => t.events.length !== parties || isZero(t.coefficient)))
		return null;
	return Object.fromEntries(functional.terms.map((t) => [tableKey(t.events), t.coefficient.text]));
}
