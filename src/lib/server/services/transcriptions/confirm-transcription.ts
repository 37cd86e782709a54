import { transcriptionInput, type TranscriptionInput } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { findClaim } from '../claims/find-claim';
import { parseInput } from '../parse-input';
import { requireMayConfirm } from './may-confirm';
import { readComparison } from './read-comparison';
import { recordTranscriptionCheck } from './record-transcription-check';

/**
 * A second person says that value, locator and inequality are the paper's, or what is wrong.
 * @throws ServiceError conflict when the claim was edited since the page was opened
 */
export async function confirmTranscription(
	ctx: GroupContext,
	number: number,
	input: TranscriptionInput
): Promise<{ confirmed: boolean }> {
	const { version, note, ...answers } = parseInput(transcriptionInput, input);
	return ctx.db.write(async (tx) => {
		const claim = await findClaim(tx, ctx, number);
		await requireMayConfirm(tx, ctx, claim);
		if (claim.version !== version) {
			throw new ServiceError(
				'conflict',
				'Someone has changed this claim since you opened it. Compare it once more, as it is now.'
			);
		}
		const comparison = readComparison(answers, note);
		const { confirmed } = await recordTranscriptionCheck(tx, ctx, claim, {
			...comparison,
			taskId: null
		});
		return { confirmed };
	});
}
