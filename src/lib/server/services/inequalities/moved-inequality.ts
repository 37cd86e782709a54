import { eq } from 'drizzle-orm';
import type { Context, GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { inequalityRedirects } from '../../db/schema';
import { findInequality } from './inequality-rows';
import { isPublicInequality, isVisibleToGroup, mayViewInequality } from './visibility';

/** An inequality that was merged into another: the form it had, and the id of the one it is now. */
export type FormerInequality = typeof inequalityRedirects.$inferSelect;

export async function findFormer(read: Reader, id: string): Promise<FormerInequality | null> {
	const [row] = await read.select().from(inequalityRedirects).where(eq(inequalityRedirects.id, id));
	return row ?? null;
}

/** Where a group's page of an inequality has moved; null: nowhere, or not for the group to see. */
export async function movedForGroup(ctx: GroupContext, id: string): Promise<string | null> {
	const { read } = ctx.db;
	const keptId = (await findFormer(read, id))?.keptId ?? null;
	return keptId && (await isVisibleToGroup(read, keptId, ctx.group.id)) ? keptId : null;
}

/** The same for the public page. */
export async function movedForPublic(ctx: Context, id: string): Promise<string | null> {
	const keptId = (await findFormer(ctx.db.read, id))?.keptId ?? null;
	return keptId && (await isPublicInequality(ctx.db.read, keptId)) ? keptId : null;
}

/** The same for the API, whose caller may see it by any of the ways. */
export async function movedForCaller(ctx: Context, id: string): Promise<string | null> {
	const keptId = (await findFormer(ctx.db.read, id))?.keptId ?? null;
	const kept = keptId && (await findInequality(ctx.db.read, keptId));
	return kept && (await mayViewInequality(ctx, kept)) ? kept.id : null;
}
