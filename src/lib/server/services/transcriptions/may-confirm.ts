import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import type { ClaimRow } from '../claims/find-claim';
import { wroteVersion } from './wrote-version';

/** Whether the person may compare the claim with its paper: a member who did not write it. */
export async function mayConfirm(
	read: Reader,
	ctx: GroupContext,
	claim: ClaimRow
): Promise<boolean> {
	if (claim.state === 'withdrawn') return false;
	const own = await wroteVersion(read, claim, ctx.actor.id);
	return may(ctx.role, 'confirm-transcription', { own });
}
