import { createHash } from 'node:crypto';
import { asc, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { SettingsView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { formerSlugs, groups } from '../../db/schema';
import { ServiceError } from '../../errors';
import { budgetSeconds } from '../recomputations/budget';

export interface GroupSettings {
	readonly name: string;
	readonly description: string;
	readonly budgetSeconds: number | null;
	readonly slug: string;
}

/** @throws ServiceError not-found */
export async function loadSettings(read: Reader, groupId: string): Promise<GroupSettings> {
	const [found] = await read
		.select({
			name: groups.name,
			description: groups.description,
			budgetSeconds: groups.budgetSeconds,
			slug: groups.slug
		})
		.from(groups)
		.where(eq(groups.id, groupId));
	if (!found) throw new ServiceError('not-found', 'There is no such group.');
	return found;
}

/** Differs when any setting does. */
export function settingsVersion(settings: GroupSettings): string {
	const { name, description, budgetSeconds, slug } = settings;
	const text = JSON.stringify([name, description, budgetSeconds, slug]);
	return createHash('sha256').update(text).digest('base64url').slice(0, 16);
}

/** @throws ServiceError forbidden */
export async function showSettings(ctx: GroupContext): Promise<SettingsView> {
	if (!may(ctx.role, 'change-settings')) {
		throw new ServiceError('forbidden', 'Settings are for maintainers and owners.');
	}
	const { read } = ctx.db;
	const settings = await loadSettings(read, ctx.group.id);
	const former = await read
		.select({ slug: formerSlugs.slug })
		.from(formerSlugs)
		.where(eq(formerSlugs.groupId, ctx.group.id))
		.orderBy(asc(formerSlugs.slug));
	return {
		...settings,
		version: settingsVersion(settings),
		siteBudgetSeconds: budgetSeconds(),
		formerSlugs: former.map(({ slug }) => slug),
		mayChangeAddress: may(ctx.role, 'change-address')
	};
}
