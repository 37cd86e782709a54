import { desc, eq, type SQL } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { hasRole } from '../../../ledger/roles';
import type { ActivityEntry } from '../../../schemas/talk-views';
import type { GroupContext } from '../../context';
import { audit, users } from '../../db/schema';
import { activitySentence } from './activity-sentence';
import { fieldChanges } from './field-changes';
import { isId, namesOf, type Named } from './names-of';
import { asRecorded, textOf, type Recorded } from './recorded';

type Names = ReadonlyMap<string, Named>;
type AuditRow = typeof audit.$inferSelect;

/**
 * Audit rows as sentences, newest first. What changed field by field, and the request that changed
 * it, is for maintainers: it holds what was removed since, and addresses of people invited.
 */
export async function activityEntries(
	ctx: GroupContext,
	which: SQL | undefined,
	{ limit, offset = 0 }: { readonly limit: number; readonly offset?: number }
): Promise<readonly ActivityEntry[]> {
	const { read } = ctx.db;
	const rows = await read
		.select({ row: audit, who: users.name })
		.from(audit)
		.leftJoin(users, eq(users.id, audit.actorId))
		.where(which)
		.orderBy(desc(audit.at), desc(audit.id))
		.limit(limit)
		.offset(offset);
	const named = await namesOf(
		read,
		ctx,
		rows.flatMap(({ row }) => idsOf(row))
	);
	const whole = hasRole(ctx.role, 'maintainer');
	return rows.map(({ row, who }) => {
		const [before, after] = [asRecorded(row.before), asRecorded(row.after)];
		const wordsOf = (id: unknown) => (isId(id) ? (named.get(id)?.words ?? null) : null);
		const facts = {
			before,
			after,
			claim: claimWords(row, named),
			task: taskWords(row, after, named),
			subject: subjectWords(row, after, named),
			person: wordsOf(row.entityId) ?? 'somebody',
			named: wordsOf
		};
		return {
			id: row.id,
			at: row.at.toISOString(),
			who,
			...activitySentence(row.action, who, facts),
			href: hrefOf(ctx, row, named),
			changes: whole ? fieldChanges(before, after, wordsOf) : [],
			requestId: whole ? row.requestId : ''
		};
	});
}

function idsOf(row: AuditRow): string[] {
	const values = [row.entityId, row.claimId, ...deep(row.before), ...deep(row.after)];
	return values.filter(isId);
}

function deep(value: unknown): unknown[] {
	return typeof value === 'object' && value !== null ? Object.values(value).flatMap(deep) : [value];
}

function claimWords({ claimId }: AuditRow, named: Names): string {
	return (claimId !== null && named.get(claimId)?.words) || 'a claim';
}

function taskWords(row: AuditRow, after: Recorded, named: Names): string {
	const entity = named.get(row.entityId);
	const task = row.entity === 'submission' && entity?.on ? named.get(entity.on) : entity;
	const number = after.number;
	const words = task?.words ?? (typeof number === 'number' ? `task ${number}` : 'a task');
	return row.claimId === null ? words : `${words} on ${claimWords(row, named)}`;
}

function subjectWords(row: AuditRow, after: Recorded, named: Names): string {
	const subject = textOf(after, 'subject');
	const words = named.get(textOf(after, 'subjectId'))?.words;
	if (subject === 'claim') return claimWords(row, named);
	if (subject === 'task') return `${words ?? 'a task'} on ${claimWords(row, named)}`;
	return words ?? 'an inequality';
}

/** Where it can be seen: the thing itself, else the claim it was about. */
function hrefOf(ctx: GroupContext, row: AuditRow, named: Names): string | null {
	const base = `/g/${ctx.group.slug}`;
	if (row.entity === 'group') return may(ctx.role, 'change-settings') ? `${base}/settings` : null;
	if (row.entity === 'invitation') return `${base}/members`;
	const found = named.get(row.entityId)?.path ?? (row.claimId && named.get(row.claimId)?.path);
	return found ? base + found : null;
}
