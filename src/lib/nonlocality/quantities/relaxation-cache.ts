import type { ProblemOf } from '../problem';
import type { MomentProblem } from './moment-problem';
import type { SymmetryReduction } from './symmetry-reduction';

/** Entries kept, and bytes they may take together; the oldest go first. */
const MOST_ENTRIES = 24;
const MOST_BYTES = 2 ** 27;

/** What solving a problem again need not do again. */
export interface PreparedRelaxation {
	readonly problem: MomentProblem;
	/** Null when the plain problem is the better choice. */
	readonly reduction: SymmetryReduction | null;
}

function bytesOf({ problem, reduction }: PreparedRelaxation): number {
	const { size, unknowns } = problem.programme;
	return 4 * size * size + 200 * unknowns + (reduction?.bytes ?? 0);
}

/** By the problem as it is written: a relabelled or rescaled functional is another entry. */
const entries = new Map<string, PreparedRelaxation>();

export function preparedRelaxation(
	problem: ProblemOf<'npa'>,
	prepare: () => PreparedRelaxation
): PreparedRelaxation {
	const { outputs, terms, sense, constraints, level, nonNegative } = problem;
	const key = JSON.stringify([outputs, terms, sense, constraints, level, nonNegative]);
	const known = entries.get(key);
	const entry = known ?? prepare();
	if (bytesOf(entry) > MOST_BYTES) return entry;
	entries.delete(key);
	entries.set(key, entry);
	let bytes = [...entries.values()].reduce((sum, each) => sum + bytesOf(each), 0);
	for (const [oldest, each] of entries) {
		if (entries.size <= MOST_ENTRIES && bytes <= MOST_BYTES) break;
		entries.delete(oldest);
		bytes -= bytesOf(each);
	}
	return entry;
}

/** Forgets everything; for measurements from a cold start. */
export function clearPreparedRelaxations(): void {
	entries.clear();
}
