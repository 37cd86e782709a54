import { and, asc, eq, lte } from 'drizzle-orm';
import { mailWorthy } from '../../ledger/verdict';
import type { Database } from '../db/client';
import { claims, groups, inequalities, memberships, outbox, references, users } from '../db/schema';
import { renderDiscrepancy, type RenderedMail } from './discrepancy-mail';
import type { MailTransport } from './transport';

const BATCH = 20;
export const MOST_ATTEMPTS = 10;
const FIRST_DELAY_MS = 60_000;
const LONGEST_DELAY_MS = 6 * 3_600_000;

/** 1 min, 2 min, 4 min ... 6 h after the failed attempt of that number (from 1). */
export const retryDelay = (attempt: number) =>
	Math.min(LONGEST_DELAY_MS, FIRST_DELAY_MS * 2 ** (attempt - 1));

export interface SenderOptions {
	readonly db: Database;
	readonly transport: MailTransport;
	/** Address of the site, for links. */
	readonly origin: string;
	now(): Date;
	/** Called with what went wrong; the mail stays in the outbox. */
	onFailure?(messageId: string, error: Error, dead: boolean): void;
}

/**
 * Sends what is due in the outbox. At least once: a crash between sending and marking sends it
 * again under the same Message-ID.
 * @returns how many were sent
 */
export async function sendDueMails(options: SenderOptions): Promise<number> {
	const { db, transport, now } = options;
	const due = await db.read
		.select({
			id: outbox.id,
			messageId: outbox.messageId,
			attempts: outbox.attempts,
			claimId: outbox.claimId,
			userId: outbox.userId,
			name: users.name,
			address: users.email
		})
		.from(outbox)
		.innerJoin(users, eq(users.id, outbox.userId))
		.where(and(eq(outbox.state, 'waiting'), lte(outbox.notBefore, now())))
		.orderBy(asc(outbox.notBefore))
		.limit(BATCH);
	let sent = 0;
	for (const row of due) {
		const mail = await render(options, row);
		if (!mail) {
			await mark(db, row.id, { state: 'dropped' });
			continue;
		}
		try {
			const to = { name: row.name, address: row.address };
			await transport.send({ ...mail, to, messageId: row.messageId });
			await mark(db, row.id, { state: 'sent', sentAt: now(), attempts: row.attempts + 1 });
			sent++;
		} catch (cause) {
			const error = cause instanceof Error ? cause : new Error(String(cause));
			const attempts = row.attempts + 1;
			const dead = attempts >= MOST_ATTEMPTS;
			options.onFailure?.(row.messageId, error, dead);
			await mark(db, row.id, {
				attempts,
				lastError: error.message.slice(0, 500),
				...(dead
					? { state: 'dead' as const }
					: { notBefore: new Date(now().getTime() + retryDelay(attempts)) })
			});
		}
	}
	return sent;
}

async function mark(db: Database, id: string, values: Partial<typeof outbox.$inferInsert>) {
	await db.write((tx) =>
		tx
			.update(outbox)
			.set(values)
			.where(and(eq(outbox.id, id), eq(outbox.state, 'waiting')))
	);
}

/** From the verdict as it stands now; null when there is nothing to tell that person any more. */
async function render(
	{ db, origin }: SenderOptions,
	row: { claimId: string | null; userId: string | null; name: string }
): Promise<RenderedMail | null> {
	if (row.claimId === null || row.userId === null) return null;
	const [found] = await db.read
		.select({
			claim: claims,
			groupName: groups.name,
			slug: groups.slug,
			reference: references.short,
			inequality: inequalities.name
		})
		.from(claims)
		.innerJoin(groups, eq(groups.id, claims.groupId))
		.innerJoin(references, eq(references.id, claims.referenceId))
		// Who has left the group gets no more of its mail.
		.innerJoin(
			memberships,
			and(eq(memberships.groupId, claims.groupId), eq(memberships.userId, row.userId))
		)
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.where(eq(claims.id, row.claimId));
	if (!found) return null;
	const { claim } = found;
	if (claim.state === 'withdrawn' || !mailWorthy(claim.verdict)) return null;
	return renderDiscrepancy({
		name: row.name,
		groupName: found.groupName,
		number: claim.number,
		title: `${claim.quantityLabel} of ${found.inequality ?? claim.subject}`,
		relation: claim.relation,
		printed: claim.printed,
		reference: found.reference,
		locator: claim.locator,
		verdict: claim.verdict,
		link: `${origin}/g/${found.slug}/claims/${claim.number}`
	});
}
