import { momentKey } from './moment-words';
import { momentOfEvents, wordOfEvents, type MomentMatrix } from './moment-matrix';
import type { SparseRow } from '../optimization/moment-programme';
import type { Event } from '../scenario/scenario';

/** P(outputs | inputs) >= 0 of some parties, as a linear form on the moments. */
export interface ProbabilityRow {
	/** `"a,b|x,y"`; `-` stands for a party that is not measured. */
	readonly key: string;
	readonly row: SparseRow;
}

/**
 * The rows P >= 0 whose moments the level determines, for the largest such sets of parties. Rows
 * that the matrix implies (every product of their projectors is one of its monomials) are left out.
 */
export function probabilityRows(matrix: MomentMatrix): ProbabilityRow[] {
	const outputs = matrix.alphabet.scenario.outputs;
	const monomials = new Set(matrix.words.map(momentKey));
	const rows: ProbabilityRow[] = [];
	const covered = new Set<string>();
	const partySets = subsets(outputs.length).sort((a, b) => b.length - a.length);
	for (const parties of partySets) {
		if (parties.length < 2) continue; // diagonal cells: implied
		for (const inputs of tuples(parties.map((party) => outputs[party]?.length ?? 0))) {
			const setting = parties.map((party, i) => [party, inputs[i] ?? 0] as const);
			const products = setting.reduce<Event[][]>(
				(found, [party, input]) => {
					const last = (outputs[party]?.[input] ?? 1) - 1;
					return [
						...found,
						...found.flatMap((events) =>
							Array.from({ length: last }, (_, a) => [...events, [party, input, a] as const])
						)
					];
				},
				[[]]
			);
			if (covered.has(settingKey(setting))) continue;
			if (products.some((events) => momentOfEvents(matrix, events) === null)) continue;
			for (const kept of subsets(setting.length))
				covered.add(settingKey(setting.filter((_, i) => kept.includes(i))));
			const implied = products.every((events) =>
				monomials.has(momentKey(wordOfEvents(matrix.alphabet, events)))
			);
			if (!implied) rows.push(...rowsOfSetting(matrix, setting));
		}
	}
	return rows;
}

type Setting = readonly (readonly [party: number, input: number])[];

const settingKey = (setting: Setting) => setting.map((part) => part.join('.')).join(' ');

function rowsOfSetting(matrix: MomentMatrix, setting: Setting): ProbabilityRow[] {
	const outputs = matrix.alphabet.scenario.outputs;
	const counts = setting.map(([party, input]) => outputs[party]?.[input] ?? 0);
	return tuples(counts).map((results) => {
		let terms: { events: Event[]; sign: number }[] = [{ events: [], sign: 1 }];
		setting.forEach(([party, input], i) => {
			const output = results[i] ?? 0;
			const last = (counts[i] ?? 1) - 1;
			const with_ = (events: Event[], a: number): Event[] => [...events, [party, input, a]];
			terms = terms.flatMap(({ events, sign }) =>
				output < last
					? [{ events: with_(events, output), sign }]
					: [
							{ events, sign },
							...Array.from({ length: last }, (_, a) => ({ events: with_(events, a), sign: -sign }))
						]
			);
		});
		const values = new Map<number, number>();
		for (const { events, sign } of terms) {
			const moment = momentOfEvents(matrix, events) ?? 0;
			values.set(moment, (values.get(moment) ?? 0) + sign);
		}
		return {
			key: rowKey(outputs.length, setting, results),
			row: { columns: [...values.keys()], values: [...values.values()] }
		};
	});
}

function rowKey(parties: number, setting: Setting, results: readonly number[]): string {
	const a = Array.from({ length: parties }, () => '-');
	const x = Array.from({ length: parties }, () => '-');
	setting.forEach(([party, input], i) => {
		a[party] = String(results[i]);
		x[party] = String(input);
	});
	return `${a.join(',')}|${x.join(',')}`;
}

/** All subsets of 0 .. count-1. */
function subsets(count: number): number[][] {
	return Array.from({ length: 2 ** count }, (_, mask) =>
		Array.from({ length: count }, (_unused, i) => i).filter((i) => (mask >> i) & 1)
	);
}

/** All tuples with entry i below counts[i]. */
function tuples(counts: readonly number[]): number[][] {
	return counts.reduce<number[][]>(
		(found, count) =>
			found.flatMap((tuple) => Array.from({ length: count }, (_, value) => [...tuple, value])),
		[[]]
	);
}
