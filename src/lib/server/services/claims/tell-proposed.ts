import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { newId } from '../../ids';
import { maintainersOf } from '../groups/maintainers-of';
import { notify } from '../notifications/notify';

/** Tells those who decide on it that a claim is proposed for publication; each time it is. */
export async function tellProposed(
	tx: Transaction,
	ctx: GroupContext,
	claimId: string
): Promise<void> {
	await notify(tx, ctx, {
		kind: 'claim-proposed',
		groupId: ctx.group.id,
		recipients: await maintainersOf(tx, ctx.group.id),
		event: newId(),
		claimId
	});
}
