import { and, eq, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Relation } from '../../../ledger/claim';
import type { CommentSubject } from '../../../ledger/comments';
import {
	DEFAULT_DELIVERY,
	type Delivery,
	type NotificationKind
} from '../../../ledger/notifications';
import type { Role } from '../../../ledger/roles';
import type { TaskKind, TaskState } from '../../../ledger/tasks';
import type { Verdict } from '../../../ledger/verdict';
import type { Reader } from '../../db/client';
import {
	authorMessages,
	claims,
	commentMentions,
	comments,
	groups,
	inequalities,
	memberships,
	notificationChoices,
	notifications,
	references,
	tasks,
	users
} from '../../db/schema';

export interface ClaimFacts {
	readonly number: number;
	/** `Quantum maximum of CHSH`. */
	readonly title: string;
	readonly relation: Relation;
	readonly printed: string;
	readonly reference: string;
	readonly locator: string;
	readonly state: 'active' | 'superseded' | 'withdrawn';
	readonly visibility: 'group' | 'proposed' | 'public';
	readonly verdict: Verdict;
}

export interface TaskFacts {
	readonly number: number;
	readonly kind: TaskKind;
	readonly state: TaskState;
	readonly assigneeId: string | null;
	readonly createdBy: string;
	readonly dueOn: string | null;
	readonly instructions: string;
}

export interface CommentFacts {
	readonly id: string;
	readonly subject: CommentSubject;
	readonly subjectId: string;
	/** The name of the inequality, where it is about one. */
	readonly inequality: string | null;
	readonly body: string;
	readonly removed: boolean;
	/** Its text, as it is now, mentions the recipient. */
	readonly mentions: boolean;
}

export interface MessageFacts {
	readonly name: string;
	readonly email: string;
	readonly message: string;
	readonly handled: boolean;
}

/** A notification with the rows it points at, as they are now. */
export interface NotificationFacts {
	readonly id: string;
	readonly kind: NotificationKind;
	readonly at: Date;
	readonly unread: boolean;
	/** What it says beyond the rows: a reason, a date. */
	readonly text: string;
	readonly recipient: { readonly id: string; readonly name: string; readonly address: string };
	readonly role: Role;
	/** As the recipient has chosen by now. */
	readonly delivery: Delivery;
	readonly group: { readonly id: string; readonly name: string; readonly slug: string };
	/** Null: the product itself, or somebody without an account. */
	readonly actor: string | null;
	readonly claim: ClaimFacts | null;
	readonly task: TaskFacts | null;
	readonly comment: CommentFacts | null;
	readonly message: MessageFacts | null;
}

const recipient = alias(users, 'recipient');
const actor = alias(users, 'actor');
const talkedOf = alias(inequalities, 'talked_of');

/**
 * The query behind the list, mails and digests; add conditions, order and limit. Who has left the
 * group hears no more of it, so what they were told is not found either.
 */
export function selectFacts(read: Reader) {
	return read
		.select({
			notification: notifications,
			recipient: { id: recipient.id, name: recipient.name, address: recipient.email },
			role: memberships.role,
			delivery: notificationChoices.delivery,
			group: { id: groups.id, name: groups.name, slug: groups.slug },
			actor: actor.name,
			claim: claims,
			reference: references.short,
			inequality: inequalities.name,
			task: tasks,
			comment: comments,
			talkedOf: talkedOf.name,
			mentioned: commentMentions.userId,
			message: authorMessages
		})
		.from(notifications)
		.innerJoin(recipient, eq(recipient.id, notifications.userId))
		.innerJoin(groups, eq(groups.id, notifications.groupId))
		.innerJoin(
			memberships,
			and(
				eq(memberships.groupId, notifications.groupId),
				eq(memberships.userId, notifications.userId)
			)
		)
		.leftJoin(
			notificationChoices,
			and(
				eq(notificationChoices.userId, notifications.userId),
				eq(notificationChoices.kind, notifications.kind)
			)
		)
		.leftJoin(actor, eq(actor.id, notifications.actorId))
		.leftJoin(tasks, eq(tasks.id, notifications.taskId))
		.leftJoin(claims, eq(claims.id, sql`coalesce(${notifications.claimId}, ${tasks.claimId})`))
		.leftJoin(references, eq(references.id, claims.referenceId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.leftJoin(comments, eq(comments.id, notifications.commentId))
		.leftJoin(
			commentMentions,
			and(
				eq(commentMentions.commentId, notifications.commentId),
				eq(commentMentions.userId, notifications.userId)
			)
		)
		.leftJoin(
			talkedOf,
			and(eq(talkedOf.id, comments.subjectId), eq(comments.subject, 'inequality'))
		)
		.leftJoin(authorMessages, eq(authorMessages.id, notifications.messageId))
		.$dynamic();
}

type Row = Awaited<ReturnType<typeof selectFacts>>[number];

export function factsOf(row: Row): NotificationFacts {
	const { notification, claim, comment, message } = row;
	return {
		id: notification.id,
		kind: notification.kind,
		at: notification.createdAt,
		unread: notification.readAt === null,
		text: notification.text,
		recipient: row.recipient,
		role: row.role,
		delivery: row.delivery ?? DEFAULT_DELIVERY[notification.kind],
		group: row.group,
		actor: row.actor,
		claim: claim && {
			...claim,
			title: `${claim.quantityLabel} of ${row.inequality ?? claim.subject}`,
			reference: row.reference ?? ''
		},
		task: row.task,
		comment: comment && {
			...comment,
			inequality: row.talkedOf,
			removed: comment.removedAt !== null,
			mentions: row.mentioned !== null
		},
		message: message && { ...message, handled: message.handledAt !== null }
	};
}
