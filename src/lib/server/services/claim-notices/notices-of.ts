import { asc, eq, inArray } from 'drizzle-orm';
import type { NoticeKind } from '../../../ledger/notices';
import type { ClaimNoticeView } from '../../../schemas/task-views';
import type { Reader } from '../../db/client';
import { claimNotices, references } from '../../db/schema';
import { referenceView } from '../references/reference-view';

/** Errata and newer versions attached to a claim, in the order they were attached. */
export async function noticesOf(read: Reader, claimId: string): Promise<ClaimNoticeView[]> {
	const rows = await read
		.select({ notice: claimNotices, reference: references })
		.from(claimNotices)
		.innerJoin(references, eq(references.id, claimNotices.referenceId))
		.where(eq(claimNotices.claimId, claimId))
		.orderBy(asc(claimNotices.createdAt), asc(claimNotices.id));
	return rows.map(({ notice, reference }) => ({
		id: notice.id,
		kind: notice.kind,
		reference: referenceView(reference),
		note: notice.note,
		at: notice.createdAt.toISOString()
	}));
}

/** Which kinds of notice each claim has, for lists; claims without one are left out. */
export async function noticeKinds(
	read: Reader,
	claimIds: readonly string[]
): Promise<Map<string, readonly NoticeKind[]>> {
	if (claimIds.length === 0) return new Map();
	const rows = await read
		.selectDistinct({ claimId: claimNotices.claimId, kind: claimNotices.kind })
		.from(claimNotices)
		.where(inArray(claimNotices.claimId, [...claimIds]))
		.orderBy(asc(claimNotices.kind));
	const kinds = new Map<string, NoticeKind[]>();
	for (const { claimId, kind } of rows) {
		kinds.set(claimId, [...(kinds.get(claimId) ?? []), kind]);
	}
	return kinds;
}
