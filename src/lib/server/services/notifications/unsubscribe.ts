import { eq } from 'drizzle-orm';
import {
	NOTIFICATION_KINDS,
	NOTIFICATION_LABELS,
	type NotificationKind
} from '../../../ledger/notifications';
import type { Context } from '../../context';
import { users } from '../../db/schema';
import { derivedToken, isDerivedToken } from '../../derived-token';
import { ServiceError } from '../../errors';
import { choicesOf, storeChoices, type Choices } from './choose-delivery';

const PURPOSE = 'unsubscribe';

/** What a mail's link turns off: one kind, or all that come with the digest. */
export type Unsubscribable = NotificationKind | 'digest';

const isUnsubscribable = (kind: string): kind is Unsubscribable =>
	kind === 'digest' || NOTIFICATION_KINDS.some((known) => known === kind);

/** Needs no row and never runs out: whoever holds the mail can turn off that mail and no more. */
export function unsubscribeToken(userId: string, kind: Unsubscribable): string {
	return `${userId}.${kind}.${derivedToken(PURPOSE, `${userId}:${kind}`)}`;
}

function readToken(token: string): { userId: string; kind: Unsubscribable } | null {
	const [userId = '', kind = '', code = '', ...more] = token.split('.');
	if (more.length > 0 || !isUnsubscribable(kind)) return null;
	return isDerivedToken(PURPOSE, `${userId}:${kind}`, code) ? { userId, kind } : null;
}

export interface UnsubscribeView {
	readonly kind: Unsubscribable;
	/** What the link turns off, kind by kind; empty when it is off already. */
	readonly labels: readonly string[];
}

/** What a link would turn off. @throws ServiceError not-found */
export async function showUnsubscribe(ctx: Context, token: string): Promise<UnsubscribeView> {
	const { userId, kind } = await holderOf(ctx, token);
	const kinds = kindsOf(kind, await choicesOf(ctx.db.read, userId));
	return { kind, labels: kinds.map((each) => NOTIFICATION_LABELS[each]) };
}

/** Turns it off; a second time changes nothing. @throws ServiceError not-found */
export async function unsubscribe(ctx: Context, token: string): Promise<void> {
	const { kind, actor } = await holderOf(ctx, token);
	await ctx.db.write(async (tx) => {
		const kinds = kindsOf(kind, await choicesOf(tx, actor.id));
		const never = Object.fromEntries(kinds.map((each) => [each, 'never' as const]));
		await storeChoices(tx, { ...ctx, actor }, never);
	});
}

function kindsOf(kind: Unsubscribable, choices: Choices): readonly NotificationKind[] {
	return NOTIFICATION_KINDS.filter((each) =>
		kind === 'digest' ? choices[each] === 'daily' : each === kind && choices[each] !== 'never'
	);
}

async function holderOf(ctx: Context, token: string) {
	const read = readToken(token);
	const [actor] = read
		? await ctx.db.read
				.select({ id: users.id, name: users.name, email: users.email, isAdmin: users.isAdmin })
				.from(users)
				.where(eq(users.id, read.userId))
		: [];
	if (!read || !actor) throw new ServiceError('not-found', 'This link is not one of ours.');
	return { ...read, actor };
}
