import { mayRevokeInvitation } from '../../../ledger/group-policy';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { dropInvitations } from './drop-invitations';

/**
 * Makes an invitation of this group worthless, mailed or passed on as a link.
 * @throws ServiceError forbidden, not-found (used, revoked, or of another group)
 */
export async function revokeInvitation(ctx: GroupContext, id: string): Promise<void> {
	if (!mayRevokeInvitation(ctx.role)) {
		throw new ServiceError('forbidden', 'Only maintainers and owners revoke invitations.');
	}
	await ctx.db.write(async (tx) => {
		if ((await dropInvitations(tx, ctx, [id])) === 0) {
			throw new ServiceError('not-found', 'This invitation has been used or revoked already.');
		}
	});
}
