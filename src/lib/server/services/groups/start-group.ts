import type { z } from 'zod';
import { RESERVED_SLUGS, slugFromName, startGroupInput } from '../../../schemas/group';
import type { GroupView } from '../../../schemas/views';
import type { UserContext } from '../../context';
import { groups, memberships } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';
import { addressIsTaken, isAddressTaken } from './move-address';

/**
 * Starts a group; whoever starts it is its owner.
 * @throws ServiceError invalid, conflict (the address is taken)
 */
export async function startGroup(
	ctx: UserContext,
	input: z.input<typeof startGroupInput>
): Promise<GroupView> {
	const { name, slug: chosen, description } = parseInput(startGroupInput, input);
	const slug = chosen || slugFromName(name);
	if (slug.length < 3 || RESERVED_SLUGS.some((word) => word === slug)) {
		const message = 'No address can be made from this name; choose one yourself';
		throw new ServiceError('invalid', message, [{ field: 'slug', message }]);
	}
	const group = { id: newId(), slug, name, description };
	const at = ctx.now();
	await ctx.db.write(async (tx) => {
		if (await isAddressTaken(tx, slug, null)) addressIsTaken(slug);
		await tx.insert(groups).values({ ...group, createdBy: ctx.actor.id, createdAt: at });
		await tx
			.insert(memberships)
			.values({ groupId: group.id, userId: ctx.actor.id, role: 'owner', createdAt: at });
		await recordAudit(tx, ctx, {
			action: 'group.started',
			entity: 'group',
			entityId: group.id,
			groupId: group.id,
			after: group
		});
	});
	return { ...group, role: 'owner' };
}
