import type { UserContext } from '../../context';
import { ServiceError } from '../../errors';

/** @throws ServiceError not-found, as if there were nothing, for anybody but an administrator */
export function administer(ctx: UserContext): void {
	if (!ctx.actor.isAdmin) throw new ServiceError('not-found', 'There is nothing here.');
}
