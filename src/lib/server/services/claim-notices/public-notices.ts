import type { ClaimNoticeView } from '../../../schemas/task-views';
import type { PublicNoticeView } from '../../../schemas/views';
import { publicReference } from '../references/public-reference';

/** Notices as the public sees them, each paper once a kind: its facts, not the group's ids. */
export function publicNotices(notices: readonly ClaimNoticeView[]): PublicNoticeView[] {
	const shown = new Map<string, PublicNoticeView>();
	for (const { kind, reference, note, at } of notices) {
		const key = `${kind} ${reference.id}`;
		if (shown.has(key)) continue;
		const { title, short, source, formatted, year, doi, arxiv } = publicReference(reference);
		shown.set(key, {
			kind,
			note,
			at,
			reference: { title, short, source, formatted, year, doi, arxiv }
		});
	}
	return [...shown.values()];
}
