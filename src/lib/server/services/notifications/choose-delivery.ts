import { and, eq, inArray } from 'drizzle-orm';
import { z } from 'zod';
import {
	DEFAULT_DELIVERY,
	DELIVERIES,
	NOTIFICATION_KINDS,
	NOTIFICATION_LABELS,
	type Delivery,
	type NotificationKind
} from '../../../ledger/notifications';
import type { NotificationChoice } from '../../../schemas/talk-views';
import type { Context, UserContext } from '../../context';
import type { Reader, Transaction } from '../../db/client';
import { notificationChoices as choiceRows, notifications, outbox } from '../../db/schema';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';

export type Choices = Readonly<Record<NotificationKind, Delivery>>;

/** Kinds left out stay as they are. */
const choicesInput = z.partialRecord(
	z.enum(NOTIFICATION_KINDS),
	z.enum(DELIVERIES, { error: 'Choose at once, daily or never' })
);

/** What a person has chosen, the defaults filled in. */
export async function choicesOf(read: Reader, userId: string): Promise<Choices> {
	const rows = await read
		.select({ kind: choiceRows.kind, delivery: choiceRows.delivery })
		.from(choiceRows)
		.where(eq(choiceRows.userId, userId));
	return {
		...DEFAULT_DELIVERY,
		...Object.fromEntries(rows.map(({ kind, delivery }) => [kind, delivery]))
	};
}

/** For the page of choices, in its order. */
export async function notificationChoices(
	ctx: UserContext
): Promise<readonly NotificationChoice[]> {
	const choices = await choicesOf(ctx.db.read, ctx.actor.id);
	return NOTIFICATION_KINDS.map((kind) => ({
		kind,
		label: NOTIFICATION_LABELS[kind],
		delivery: choices[kind]
	}));
}

/** Stores how a person wants to be told of each kind. @throws ServiceError invalid */
export async function chooseDelivery(
	ctx: UserContext,
	choices: Readonly<Partial<Record<NotificationKind, Delivery>>>
): Promise<void> {
	const wanted = parseInput(choicesInput, choices);
	await ctx.db.write((tx) => storeChoices(tx, ctx, wanted));
}

/** In a transaction that is open already; writes and records only what differs. */
export async function storeChoices(
	tx: Transaction,
	ctx: Pick<Context, 'requestId' | 'now'> & Pick<UserContext, 'actor'>,
	wanted: Readonly<Partial<Record<NotificationKind, Delivery>>>
): Promise<void> {
	const userId = ctx.actor.id;
	const current = await choicesOf(tx, userId);
	const before: Partial<Record<NotificationKind, Delivery>> = {};
	const after: Partial<Record<NotificationKind, Delivery>> = {};
	for (const kind of NOTIFICATION_KINDS) {
		const delivery = wanted[kind];
		if (delivery === undefined || delivery === current[kind]) continue;
		before[kind] = current[kind];
		after[kind] = delivery;
		await tx
			.insert(choiceRows)
			.values({ userId, kind, delivery })
			.onConflictDoUpdate({
				target: [choiceRows.userId, choiceRows.kind],
				set: { delivery }
			});
		if (current[kind] === 'at-once' && delivery === 'daily') await moveToDigest(tx, userId, kind);
	}
	if (Object.keys(after).length === 0) return;
	await recordAudit(tx, ctx, {
		action: 'user.notifications-chosen',
		entity: 'user',
		entityId: userId,
		before,
		after
	});
}

/** Mails of that kind that have not been sent yet come with the next digest instead. */
async function moveToDigest(
	tx: Transaction,
	userId: string,
	kind: NotificationKind
): Promise<void> {
	const moved = await tx
		.update(outbox)
		.set({ state: 'dropped' })
		.where(and(eq(outbox.userId, userId), eq(outbox.kind, kind), eq(outbox.state, 'waiting')))
		.returning({ id: outbox.notificationId });
	const ids = moved.flatMap(({ id }) => id ?? []);
	if (ids.length === 0) return;
	await tx.update(notifications).set({ forDigest: true }).where(inArray(notifications.id, ids));
}
