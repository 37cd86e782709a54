import { seededRandom, type SeededRandom } from '../../src/lib/nonlocality/linalg/seeded-random';
import type { Level, ProblemOf, ProblemTerm } from '../../src/lib/nonlocality';
import type { FamilySpec } from '../../src/lib/nonlocality/scenario/families';
import { npaProblem } from '../factories/npa-problem';

export interface Instance {
	readonly name: string;
	readonly problem: ProblemOf<'npa'>;
	/** Minutes: measured once, and only when asked for. */
	readonly long?: true;
	/** Drawn anew at every run, so that no baseline has it. */
	readonly drawn?: true;
}

const SECONDS = 3600;
/** The seed of what is random and yet the same at every run. */
const FIXED_SEED = 7;

/** A coefficient with three decimals, normally distributed. */
const coefficient = (random: SeededRandom) => random.normal().toFixed(3);

/**
 * A coefficient on every product of at most one projector per party (last outputs left out): no
 * symmetry, as good as surely.
 */
export function randomTerms(outputs: number[][], random: SeededRandom): ProblemTerm[] {
	let events: [number, number, number][][] = [[]];
	outputs.forEach((counts, party) => {
		const own = counts.flatMap((count, input) =>
			Array.from({ length: count - 1 }, (_, output): [number, number, number] => [
				party,
				input,
				output
			])
		);
		events = events.flatMap((list) => [list, ...own.map((event) => [...list, event])]);
	});
	return events.slice(1).map((list) => [coefficient(random), list]);
}

/** `inputs` per party, each with `outcomes`. */
export const scenario = (inputs: number, outcomes: number) =>
	[0, 1].map(() => Array.from({ length: inputs }, () => outcomes));

export function randomProblem(
	inputs: number,
	outcomes: number,
	level: Level,
	seed: number
): ProblemOf<'npa'> {
	const outputs = scenario(inputs, outcomes);
	const terms = randomTerms(outputs, seededRandom(seed, 100 * inputs + outcomes));
	return { ...npaProblem({ name: 'chsh' }, level), outputs, terms, seconds: SECONDS };
}

function family(name: string, spec: FamilySpec, level: Level, long?: true): Instance {
	return {
		name: `${name}, ${typeof level === 'number' ? `level ${level}` : String(level)}`,
		problem: { ...npaProblem(spec, level), seconds: SECONDS },
		...(long && { long })
	};
}

export const INSTANCES: readonly Instance[] = [
	family('CHSH', { name: 'chsh' }, '1+AB'),
	family('I3322', { name: 'i3322' }, 2),
	family('CGLMP d=3', { name: 'cglmp', d: 3 }, '1+AB'),
	family('CGLMP d=4', { name: 'cglmp', d: 4 }, '1+AB'),
	{ name: 'random 5x5, 1+AB', problem: randomProblem(5, 2, '1+AB', FIXED_SEED) },
	family('CGLMP d=5', { name: 'cglmp', d: 5 }, '1+AB'),
	family('I3322', { name: 'i3322' }, 3),
	{ name: 'random 5x5, level 2', problem: randomProblem(5, 2, 2, FIXED_SEED) },
	family('CGLMP d=6', { name: 'cglmp', d: 6 }, '1+AB', true),
	{ name: 'random 9x9, 1+AB', problem: randomProblem(9, 2, '1+AB', FIXED_SEED), long: true },
	family('I3322', { name: 'i3322' }, 4, true)
];

/** Shapes of the instances that are drawn at every run. */
const SHAPES: readonly (readonly [inputs: number, outcomes: number, level: Level])[] = [
	[3, 2, 2],
	[6, 2, '1+AB'],
	[2, 4, '1+AB'],
	[3, 3, '1+AB'],
	[4, 2, 2]
];

export function drawnInstances(seed: number): Instance[] {
	return SHAPES.map(([inputs, outcomes, level]) => ({
		name: `drawn ${inputs}x${inputs}, ${outcomes} outcomes, ${typeof level === 'number' ? `level ${level}` : String(level)}`,
		problem: randomProblem(inputs, outcomes, level, seed),
		drawn: true
	}));
}
