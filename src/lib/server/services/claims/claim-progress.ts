import { createHash } from 'node:crypto';
import type { ClaimProgressView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claimView } from './claim-view';
import { findClaim } from './find-claim';

/** How a claim stands while it is recomputed; `stamp` tells whether anything shown has changed. */
export async function claimProgress(ctx: GroupContext, number: number): Promise<ClaimProgressView> {
	const claim = await findClaim(ctx.db.read, ctx, number);
	const view = await claimView(ctx.db.read, claim, ctx.now());
	const { verdict, progress, stations, recomputations, version, state, visibility } = view;
	const shown = {
		verdict,
		stations,
		version,
		state,
		visibility,
		runs: recomputations.map((run) => [run.id, run.progress.state, run.lower, run.upper])
	};
	return {
		number,
		stamp: createHash('sha256').update(JSON.stringify(shown)).digest('base64url').slice(0, 16),
		verdict,
		progress,
		stations,
		recomputations,
		settled: recomputations.every(
			({ progress: { state: run } }) => run !== 'queued' && run !== 'running'
		)
	};
}
