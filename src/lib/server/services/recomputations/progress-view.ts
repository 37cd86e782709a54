import { and, eq, lt, sql } from 'drizzle-orm';
import { showBound } from '../../../ledger/figures';
import type { ProgressView } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { recomputations } from '../../db/schema';
import { mapSides, type AffineMap } from '../inequalities/affine';

export type ProgressRow = Pick<
	typeof recomputations.$inferSelect,
	'state' | 'progress' | 'startedAt' | 'finishedAt' | 'createdAt'
>;

export const PROGRESS_COLUMNS = {
	state: recomputations.state,
	progress: recomputations.progress,
	startedAt: recomputations.startedAt,
	finishedAt: recomputations.finishedAt,
	createdAt: recomputations.createdAt
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

/** How many jobs stand before one in the queue; groups take turns, so it is at most that. */
export async function jobsAhead(read: Reader, row: Pick<ProgressRow, 'createdAt'>) {
	const [found] = await read
		.select({ jobs: sql<number>`count(*)` })
		.from(recomputations)
		.where(and(eq(recomputations.state, 'queued'), lt(recomputations.createdAt, row.createdAt)));
	return found?.jobs ?? 0;
}
