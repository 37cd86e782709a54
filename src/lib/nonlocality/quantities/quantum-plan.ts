import { SolverStop, type Level, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { levelWords } from './moment-level';
import { STATE_LIMIT } from './see-saw-dimensions';

/** Rows of a moment matrix worth predicting a time for; npaBound has its own limit. */
const ROWS_LIMIT = 600;
/** Multiplications a second of the interior-point method, and its usual number of iterations. */
const SPEED = 1e9;
const ITERATIONS = 15;
/** Moments per squared row: 1/4 to 1/9 over the levels of the usual scenarios. */
const MOMENTS_PER_CELL = 1 / 8;
/** Products of n x n matrices that an iteration of level 1 with two-outcome inputs takes. */
const LEVEL_ONE_PRODUCTS = 12;
/** Seconds below which a level is solved before its symmetries are worth a look. */
const DEAR = 0.3;
/** A reduction by more symmetries than this is no cheaper: its set-up then counts. */
const MOST_USED_ORDER = 64;

/** Relaxations in the order they are tried: each costs a multiple of the one before, and bounds more. */
export function levelsToTry(parties: number): readonly Level[] {
	// With three parties and more the levels 1 and 2 are no cheaper, or lack a moment.
	return parties === 2 ? [1, '1+AB', 2, 3, 4] : [{ perParty: 1 }, 3, { perParty: 2 }, 4];
}

/** What a level is predicted to cost; `refused` in words where it does not fit or is too large. */
export interface LevelForecast {
	readonly seconds: number;
	readonly refused: string | null;
}

/**
 * The one place that predicts a level's seconds: whatever makes levels cheaper belongs here. A
 * forecast orders the work only; it is corrected by what levels take.
 * @param orderOfSymmetries asked only where a level would be dear without them
 */
export function predictLevel(
	{ scenario }: Functional,
	level: Level,
	orderOfSymmetries: () => number
): LevelForecast {
	try {
		const rows = levelWords(scenario, level, ROWS_LIMIT).length;
		const seconds = (cost: number) => (ITERATIONS * cost) / SPEED;
		if (level === 1 && scenario.outputs.flat().every((count) => count === 2))
			return { seconds: seconds(LEVEL_ONE_PRODUCTS * rows ** 3), refused: null };
		const moments = MOMENTS_PER_CELL * rows * rows;
		const plain = seconds(rows ** 4 + moments ** 3 / 6);
		if (plain < DEAR) return { seconds: plain, refused: null };
		// Each orbit of moments leaves one, and the blocks share the rows among them.
		const order = Math.min(orderOfSymmetries(), MOST_USED_ORDER);
		const reduced = rows ** 4 / order + (moments / order) ** 3 / 6;
		return { seconds: seconds(reduced), refused: null };
	} catch (error) {
		if (error instanceof SolverStop) return { seconds: Infinity, refused: error.message };
		throw error;
	}
}

/**
 * Local dimensions in the order they are tried. The largest number of outputs comes first: with
 * fewer dimensions an output of such a measurement is empty.
 */
export function dimensionsToTry(problem: ProblemOf<'quantum'>): readonly number[] {
	const parties = problem.outputs.length;
	const fits = (d: number) => d ** parties <= STATE_LIMIT;
	if (problem.dimensions) return problem.dimensions;
	const outputs = Math.max(2, ...problem.outputs.flat());
	const escalating = [2, 3, 4, 5, 6, 8].filter((d) => d !== outputs);
	return [outputs, ...escalating].filter(fits);
}
