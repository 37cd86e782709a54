import type { TranscriptionView } from '../../../schemas/task-views';
import type { GroupContext } from '../../context';
import { findClaim } from '../claims/find-claim';
import { mayConfirm } from './may-confirm';
import { transcriptionView } from './transcription-view';

export interface ShownTranscription extends TranscriptionView {
	/** The viewer may compare it with the paper. */
	readonly mayConfirm: boolean;
}

/** @throws ServiceError not-found, also for a claim of another group */
export async function showTranscription(
	ctx: GroupContext,
	number: number
): Promise<ShownTranscription> {
	const { read } = ctx.db;
	const claim = await findClaim(read, ctx, number);
	return {
		...(await transcriptionView(read, ctx, claim)),
		mayConfirm: await mayConfirm(read, ctx, claim)
	};
}
