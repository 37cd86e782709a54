import { sql } from 'drizzle-orm';
import { showBound } from '../../../ledger/figures';
import type { ProgressView } from '../../../schemas/views';
import { recomputations } from '../../db/schema';
import { mapSides, type AffineMap } from '../inequalities/affine';

export type ProgressRow = Pick<
	typeof recomputations.$inferSelect,
	'id' | 'state' | 'progress' | 'startedAt' | 'finishedAt'
>;

export const PROGRESS_COLUMNS = {
	id: recomputations.id,
	/** One that waits to be done over by a newer solver is done for its reader. */
	state: sql<ProgressRow['state']>`case
		when ${recomputations.renewal} and ${recomputations.checked} and ${recomputations.state} = 'queued'
		then 'done' else ${recomputations.state} end`,
	progress: recomputations.progress,
	startedAt: recomputations.startedAt,
	finishedAt: recomputations.finishedAt
} as const;

/** How a run stands, its enclosure so far in the reader's normalisation. */
export function progressView(
	row: ProgressRow,
	map: AffineMap,
	now: Date,
	ahead: number | null = null
): ProgressView {
	const { state, progress } = row;
	const running = state === 'running';
	const end = running ? now : row.finishedAt;
	const so = progress ? { lower: progress.lower, upper: progress.upper, exact: null } : null;
	const sides = running && so ? mapSides(map, so) : { lower: null, upper: null };
	return {
		state,
		stage: running ? (progress?.stage ?? 'starting') : null,
		iteration: running ? (progress?.iteration ?? null) : null,
		fraction: running ? (progress?.fraction ?? null) : null,
		lower: sides.lower && showBound(sides.lower, 'lower'),
		upper: sides.upper && showBound(sides.upper, 'upper'),
		seconds:
			row.startedAt && end ? Math.max(0, (end.getTime() - row.startedAt.getTime()) / 1000) : null,
		ahead: state === 'queued' ? ahead : null
	};
}
