import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { ServiceError } from '../../errors';
import type { ClaimRow } from '../claims/find-claim';
import { wroteAny } from './wrote-any';

/** Whether the person may compare the claim with its paper: a member who wrote none of it. */
export async function mayConfirm(
	read: Reader,
	ctx: GroupContext,
	claim: ClaimRow
): Promise<boolean> {
	if (claim.state === 'withdrawn') return false;
	const own = await wroteAny(read, claim, ctx.actor.id);
	return may(ctx.role, 'confirm-transcription', { own });
}

/** @throws ServiceError forbidden for who wrote it; conflict when it is withdrawn */
export async function requireMayConfirm(
	read: Reader,
	ctx: GroupContext,
	claim: ClaimRow
): Promise<void> {
	if (await mayConfirm(read, ctx, claim)) return;
	if (claim.state === 'withdrawn' && may(ctx.role, 'confirm-transcription')) {
		throw new ServiceError('conflict', 'This claim is withdrawn.');
	}
	throw new ServiceError(
		'forbidden',
		'A claim is compared with its paper by a second person: a member who neither entered nor edited it.'
	);
}
