/** Comments, activity and what is new, as pages and the API get them. */
import type { CommentSubject } from '../ledger/comments';
import type { Delivery, NotificationKind } from '../ledger/notifications';
import type { VerdictStatus } from '../ledger/claim';
import type { Role } from '../ledger/roles';
import type { PersonView, TaskRow } from './task-views';
import type { LedgerRow } from './views';

export interface CommentView {
	readonly id: string;
	readonly author: PersonView;
	/** Safe HTML made by the server. */
	readonly html: string;
	/** As typed, for editing; empty unless it is the viewer's. */
	readonly body: string;
	readonly at: string;
	readonly editedAt: string | null;
	/** Earlier texts, newest first, as safe HTML. */
	readonly versions: readonly { readonly html: string; readonly until: string }[];
	/** Who removed it; its text is gone then. */
	readonly removedBy: string | null;
	readonly mayEdit: boolean;
	readonly mayRemove: boolean;
	/** An edit now leaves no trace. */
	readonly fresh: boolean;
}

export interface DiscussionView {
	readonly subject: CommentSubject;
	readonly subjectId: string;
	/** Oldest first. */
	readonly comments: readonly CommentView[];
	readonly mayComment: boolean;
	/** What can stand behind an `@`. */
	readonly handles: readonly { readonly handle: string; readonly name: string }[];
}

/** What a page's form data says when a comment was refused: beside its form, with what was typed. */
export interface RefusedComment {
	/** Id of the comment; empty for a new one; `remove-` before it when it could not be removed. */
	readonly id: string;
	readonly body: string;
	readonly message: string;
}

export const ACTIVITY_KINDS = ['claims', 'tasks', 'talk', 'people', 'settings'] as const;
export type ActivityKind = (typeof ACTIVITY_KINDS)[number];

export interface ActivityEntry {
	readonly id: string;
	readonly at: string;
	/** Null: the product itself. */
	readonly who: string | null;
	/** What happened, a sentence without its subject: `assigned task 4 to Wren Aldous`. */
	readonly text: string;
	/** Where it can be seen; null when it is gone. */
	readonly href: string | null;
	readonly kind: ActivityKind;
	/** What changed, field by field, as text; empty where the sentence says it all. */
	readonly changes: readonly {
		readonly field: string;
		readonly before: string;
		readonly after: string;
	}[];
	readonly requestId: string;
}

export interface ActivityPage {
	readonly entries: readonly ActivityEntry[];
	readonly total: number;
	readonly page: number;
	readonly pageSize: number;
	readonly people: readonly PersonView[];
}

export interface NotificationView {
	readonly id: string;
	readonly kind: NotificationKind;
	readonly at: string;
	readonly unread: boolean;
	readonly groupName: string;
	/** One sentence. */
	readonly text: string;
	readonly detail: string;
	readonly href: string;
}

export interface NewsPage {
	readonly items: readonly NotificationView[];
	readonly unread: number;
	readonly total: number;
	readonly page: number;
	readonly pageSize: number;
}

export interface NotificationChoice {
	readonly kind: NotificationKind;
	readonly label: string;
	readonly delivery: Delivery;
}

/** A claim the viewer entered and what became of it. */
export interface ChangedClaim {
	readonly row: LedgerRow;
	readonly groupSlug: string;
	readonly groupName: string;
	/** When its verdict changed last. */
	readonly at: string;
	/** The verdict before; null when it is the first. */
	readonly before: VerdictStatus | null;
}

/** The home of a person: the first rows of each list, and how many there are. */
export interface HomeView {
	/** Active tasks of the viewer over all groups, soonest due first. */
	readonly tasks: readonly TaskRow[];
	/** Submissions that wait for the viewer's decision. */
	readonly toDecide: readonly TaskRow[];
	/** Newest first, of the last thirty days. */
	readonly changed: readonly ChangedClaim[];
	/** Standing discrepancies of the viewer's groups, newest first. */
	readonly discrepancies: readonly {
		readonly row: LedgerRow;
		readonly groupSlug: string;
		readonly groupName: string;
	}[];
	readonly totals: {
		readonly tasks: number;
		readonly overdue: number;
		readonly toDecide: number;
		readonly changed: number;
		readonly discrepancies: number;
	};
	/** The viewer's groups, with how many discrepancies stand in each. */
	readonly groups: readonly {
		readonly slug: string;
		readonly name: string;
		readonly role: Role;
		readonly discrepancies: number;
	}[];
	readonly unread: number;
}

/** A person's tasks over all groups. */
export interface OwnTasksPage {
	readonly rows: readonly TaskRow[];
	readonly total: number;
	readonly page: number;
	readonly pageSize: number;
	/** Of all the person's tasks, whatever the filters. */
	readonly overdue: number;
	/** For the filter. */
	readonly groups: readonly { readonly slug: string; readonly name: string }[];
}

/** A secret calendar address. */
export interface CalendarFeedView {
	readonly id: string;
	/** Null: the person's own tasks. */
	readonly groupSlug: string | null;
	readonly groupName: string | null;
	/** Null: made under another secret of the server; it still works for whoever has it. */
	readonly address: string | null;
	readonly createdAt: string;
}

/** A mail in the outbox, for the site's administrator. */
export interface OutboxRow {
	readonly id: string;
	readonly kind: string;
	readonly to: string;
	readonly state: 'waiting' | 'sent' | 'dropped' | 'dead';
	readonly attempts: number;
	readonly lastError: string | null;
	readonly createdAt: string;
	readonly notBefore: string;
}

export interface OutboxPage {
	readonly rows: readonly OutboxRow[];
	/** The state whose mails are shown. */
	readonly state: OutboxRow['state'];
	readonly counts: Readonly<Record<OutboxRow['state'], number>>;
	readonly page: number;
	readonly pageSize: number;
}
