import { asc, eq } from 'drizzle-orm';
import { NOTICE_KINDS, NOTICE_LABELS } from '../../../ledger/notices';
import type { Verdict } from '../../../ledger/verdict';
import type { ClaimInput } from '../../../schemas/claim-input';
import type { HistoryEntry } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { audit, users, verdicts } from '../../db/schema';

const STATUS_WORD = {
	agreement: 'Agreement',
	discrepancy: 'Discrepancy',
	open: 'Open'
} as const;

const ACTION_TEXT: Readonly<Record<string, string>> = {
	'claim.entered': 'Entered',
	'claim.withdrawn': 'Withdrawn',
	'claim.restored': 'Restored',
	'claim.superseded': 'Marked as superseded',
	'claim.proposed': 'Proposed for publication',
	'claim.published': 'Published',
	'claim.unpublished': 'Taken back from the public',
	'claim.recompute-asked': 'Asked to recompute',
	'claim.transcription-confirmed': 'Compared with the paper: all as printed',
	'claim.transcription-disputed': 'Compared with the paper: not as printed',
	'claim.transcription-voided': 'Comparison with the paper returned'
};

export const FIELD_WORD: Partial<Record<keyof ClaimInput, string>> = {
	printed: 'Value',
	relation: 'Relation',
	reading: 'How it is printed',
	quantity: 'Quantity',
	level: 'Level',
	expression: 'Expression',
	table: 'Table',
	locator: 'Locator',
	method: 'Method',
	note: 'Note',
	sense: 'Sense',
	dimension: 'Dimension',
	family: 'Family',
	familyParameter: 'Parameter of the family',
	described: 'Subject',
	inequalityId: 'Inequality',
	// The row of the paper; however it was named in the form, as known or pasted, it is one row.
	referenceId: 'Paper'
};

/** Not words for a person. */
export const IDS: ReadonlySet<string> = new Set(['referenceId', 'inequalityId']);

/** What happened to a claim, newest first: what people did, and what the recomputation made of it. */
export async function claimHistory(read: Reader, claimId: string): Promise<HistoryEntry[]> {
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
		.where(eq(audit.entityId, claimId))
		.orderBy(asc(audit.at), asc(audit.id));
	const judged = await read
		.select({ at: verdicts.at, status: verdicts.status, verdict: verdicts.verdict })
		.from(verdicts)
		.where(eq(verdicts.claimId, claimId))
		.orderBy(asc(verdicts.at), asc(verdicts.id));
	const entries = [
		...actions.flatMap(({ at, action, before, after, who }) => {
			const text = actionText(action, before, after);
			return text === undefined ? [] : [{ at, who, text }];
		}),
		...judgedEntries(judged)
	];
	// Where the result was there already, entering and judging have one time: then by kind.
	return entries
		.map((entry, place) => ({ ...entry, place }))
		.sort((a, b) => b.at.getTime() - a.at.getTime() || b.place - a.place)
		.map(({ at, who, text }) => ({ at: at.toISOString(), who, text }));
}

/** One entry per change of status: how the explanation grew in between is of no interest later. */
function judgedEntries(
	rows: readonly { at: Date; status: Verdict['status']; verdict: Verdict }[]
): { at: Date; who: null; text: string }[] {
	return rows
		.filter(({ status }, i) => status !== rows[i - 1]?.status)
		.map(({ at, status, verdict }) => ({
			at,
			who: null,
			text: `${judgedWord(verdict)}: ${STATUS_WORD[status]}`
		}));
}

/** A verdict that rests on a person's reproduction was not recomputed here. */
function judgedWord({ enclosure, reasonCode }: Verdict): string {
	if (enclosure?.worth === 'person') return 'Reproduced';
	return reasonCode === 'no-solver' ? 'Judged' : 'Recomputed';
}

function actionText(action: string, before: unknown, after: unknown): string | undefined {
	if (action === 'claim.edited') return editText(before, after);
	if (action === 'claim.unpublished' && fieldOf(before, 'visibility') === 'proposed')
		return 'Proposal taken back';
	if (action === 'claim.notice-attached') return `${noticeWord(after)} attached`;
	if (action === 'claim.notice-removed') return `${noticeWord(before)} removed`;
	return ACTION_TEXT[action];
}

function editText(before: unknown, after: unknown): string {
	const changed = Object.entries(FIELD_WORD).flatMap(([field, word]) => {
		const [was, is] = [fieldOf(before, field), fieldOf(after, field)];
		if (was === is) return [];
		const short = !IDS.has(field) && was && is && was.length <= 40 && is.length <= 40;
		return [short ? `${word} changed from ${was} to ${is}` : `${word} changed`];
	});
	return changed.length > 0 ? [...new Set(changed)].join('; ') : 'Edited';
}

function noticeWord(notice: unknown): string {
	const kind = NOTICE_KINDS.find((kind) => kind === fieldOf(notice, 'kind'));
	return kind ? NOTICE_LABELS[kind] : 'Notice';
}

function fieldOf(input: unknown, field: string): string {
	const value: unknown = typeof input === 'object' && input ? Reflect.get(input, field) : '';
	return typeof value === 'string' ? value : '';
}
