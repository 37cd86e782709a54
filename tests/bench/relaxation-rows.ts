import { momentProblemSdpa } from '../../src/lib/nonlocality/quantities/moment-problem-sdpa';
import { makeMomentProblem } from '../../src/lib/nonlocality/quantities/moment-problem';
import { functionalToMaximise } from '../../src/lib/nonlocality/scenario/problem-functional';
import { OURS, ourContenders } from './contenders';
import type { Instance } from './instances';
import { measureAll } from './measure';
import { NATIVE, SMALLEST, type NativeBench, type NativeName } from './native-solvers';
import { ratiosOf, type Ratios } from './ratios';
import { printRatio, printTime, Table } from './table';

export const RELAXATION_TABLE = new Table(
	[
		{ title: 'relaxation', align: 'left' },
		...['n', 'm', 'JS', 'WASM', 'cold', 'warm', 'csdp', 'no start', 'sdpa'].map((title) => ({
			title
		})),
		...['WASM/csdp', 'cold/csdp', 'warm/csdp'].map((title) => ({ title }))
	],
	[31, 3, 4, 6, 6, 6, 6, 6, 8, 6, 11, 11, 11]
);

/** Milliseconds of each native solver on its smallest programme. */
export function measureStart(
	native: NativeBench,
	solvers: readonly NativeName[],
	rounds: number
): Promise<Map<string, number>> {
	const contenders = solvers.map((solver) => native.contender(solver, SMALLEST));
	return measureAll(contenders, Math.max(rounds, 5));
}

/** One line of the table: all contenders, interleaved. */
export async function measureInstance(
	{ problem, long, name }: Instance,
	native: NativeBench,
	solvers: readonly NativeName[],
	starts: ReadonlyMap<string, number>,
	rounds: number
): Promise<{ line: string; ratios: Ratios }> {
	const { size, unknowns } = makeMomentProblem(problem, functionalToMaximise(problem)).programme;
	const text = momentProblemSdpa(problem);
	const contenders = [
		...ourContenders(problem, long === true),
		...NATIVE.filter((each) => solvers.includes(each.name)).map((each) =>
			native.contender(each.name, text)
		)
	];
	const times = await measureAll(contenders, long ? 1 : rounds);
	const time = (contender: string) => times.get(contender) ?? NaN;
	const csdpStart = starts.get('csdp') ?? NaN;
	const difference = time('csdp') - csdpStart;
	const ratios = ratiosOf({
		wasm: time(OURS.wasm),
		cold: time(OURS.cold),
		warm: time(OURS.warm),
		csdp: time('csdp'),
		csdpStart
	});
	const both = (ours: string) =>
		`${printRatio(time(ours) / time('csdp'))} / ${printRatio(time(ours) / difference)}`;
	const line = RELAXATION_TABLE.row([
		name,
		String(size),
		String(unknowns),
		...[OURS.js, OURS.wasm, OURS.cold, OURS.warm, 'csdp'].map((each) => printTime(time(each))),
		printTime(difference),
		printTime(time('sdpa')),
		...[OURS.wasm, OURS.cold, OURS.warm].map(both)
	]);
	return { line, ratios };
}
