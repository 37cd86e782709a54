import { and, asc, eq } from 'drizzle-orm';
import { STATUS_LABELS } from '../../../ledger/claim';
import { NOTICE_KINDS, NOTICE_LABELS } from '../../../ledger/notices';
import type { Verdict } from '../../../ledger/verdict';
import type { HistoryEntry } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { audit, users, verdicts } from '../../db/schema';
import { changedClaimFields, type ChangedField } from '../activity/claim-fields';
import { asRecorded, textOf, type Recorded } from '../activity/recorded';

const ACTION_TEXT: Readonly<Record<string, string>> = {
	'claim.entered': 'Entered',
	'claim.withdrawn': 'Withdrawn',
	'claim.restored': 'Restored',
	'claim.superseded': 'Marked as superseded',
	'claim.proposed': 'Proposed for publication',
	'claim.published': 'Published',
	'claim.unpublished': 'Taken back from the public',
	'claim.recompute-asked': 'Asked to recompute',
	'claim.certificate-attached': 'Attached a certificate',
	'claim.transcription-confirmed': 'Compared with the paper: all as printed',
	'claim.transcription-disputed': 'Compared with the paper: not as printed',
	'claim.transcription-voided': 'Comparison with the paper returned'
};

/** Of these everybody may know; what else people do with a claim is their group's matter. */
const PUBLIC_ACTIONS: ReadonlySet<string> = new Set([
	'claim.entered',
	'claim.published',
	'claim.superseded'
]);

interface Entry {
	readonly at: Date;
	readonly who: string | null;
	readonly text: string;
	/** What everybody may read of it; null: nothing. */
	readonly publicText: string | null;
}

/** What happened to a claim, newest first: what people did, and what the recomputation made of it. */
export async function claimHistory(read: Reader, claimId: string): Promise<HistoryEntry[]> {
	const entries = await entriesOf(read, claimId);
	return entries.map(({ at, who, text }) => ({ at: at.toISOString(), who, text }));
}

/** The same for everybody: no names, and of an edit only what became of the value. */
export async function publicHistory(read: Reader, claimId: string): Promise<HistoryEntry[]> {
	const entries = await entriesOf(read, claimId);
	return entries.flatMap(({ at, publicText }) =>
		publicText === null ? [] : [{ at: at.toISOString(), who: null, text: publicText }]
	);
}

async function entriesOf(read: Reader, claimId: string): Promise<readonly Entry[]> {
	const actions = await read
		.select({
			at: audit.at,
			action: audit.action,
			before: audit.before,
			after: audit.after,
			who: users.name
		})
		.from(audit)
		.leftJoin(users, eq(users.id, audit.actorId))
		.where(and(eq(audit.entity, 'claim'), eq(audit.entityId, claimId)))
		.orderBy(asc(audit.at), asc(audit.id));
	const judged = await read
		.select({ at: verdicts.at, status: verdicts.status, verdict: verdicts.verdict })
		.from(verdicts)
		.where(eq(verdicts.claimId, claimId))
		.orderBy(asc(verdicts.at), asc(verdicts.id));
	const entries = [
		...actions.flatMap(({ at, who, action, before, after }): Entry[] => {
			const texts = textsOf(action, asRecorded(before), asRecorded(after));
			return texts ? [{ at, who, ...texts }] : [];
		}),
		...judgedEntries(judged)
	];
	// Where the result was there already, entering and judging have one time: then by kind.
	return entries
		.map((entry, place) => ({ ...entry, place }))
		.sort((a, b) => b.at.getTime() - a.at.getTime() || b.place - a.place);
}

/** One entry per change of status: how the explanation grew in between is of no interest later. */
function judgedEntries(
	rows: readonly { at: Date; status: Verdict['status']; verdict: Verdict }[]
): Entry[] {
	return rows
		.filter(({ status }, i) => status !== rows[i - 1]?.status)
		.map(({ at, status, verdict }) => {
			const text = `${judgedWord(verdict)}: ${STATUS_LABELS[status]}`;
			return { at, who: null, text, publicText: text };
		});
}

/** A verdict that rests on a person's reproduction was not recomputed here. */
function judgedWord({ enclosure, reasonCode }: Verdict): string {
	if (enclosure?.worth === 'person') return 'Reproduced';
	return reasonCode === 'no-solver' ? 'Judged' : 'Recomputed';
}

function textsOf(
	action: string,
	before: Recorded,
	after: Recorded
): Pick<Entry, 'text' | 'publicText'> | null {
	if (action === 'claim.edited') {
		const changed = changedClaimFields(before, after);
		const value = changed.find(({ field }) => field === 'printed');
		const text = changed.map(changeText).join('; ') || 'Edited';
		return { text, publicText: value ? changeText(value) : null };
	}
	const text = actionText(action, before, after);
	if (text === undefined) return null;
	return { text, publicText: PUBLIC_ACTIONS.has(action) ? text : null };
}

function actionText(action: string, before: Recorded, after: Recorded): string | undefined {
	if (action === 'claim.unpublished' && textOf(before, 'visibility') === 'proposed')
		return 'Proposal taken back';
	if (action === 'claim.notice-attached') return `${noticeWord(after)} attached`;
	if (action === 'claim.notice-removed') return `${noticeWord(before)} removed`;
	return ACTION_TEXT[action];
}

const changeText = ({ word, was, is, short }: ChangedField) =>
	short ? `${word} changed from ${was} to ${is}` : `${word} changed`;

function noticeWord(notice: Recorded): string {
	const kind = NOTICE_KINDS.find((kind) => kind === textOf(notice, 'kind'));
	return kind ? NOTICE_LABELS[kind] : 'Notice';
}
