import { eq, type SQL } from 'drizzle-orm';
import { publicVerdict } from '../../../ledger/public-verdict';
import { wantsTask } from '../../../ledger/suggested-task';
import { dayOf } from '../../../ledger/tasks';
import type { LedgerRow } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { claims, inequalities, recomputations, references } from '../../db/schema';
import { printedHtml } from '../../math/printed-html';
import { noticeKinds } from '../claim-notices/notices-of';
import { readMap } from '../inequalities/affine';
import { loadStations, stationsView } from '../inequalities/stations-view';
import { claimSubject } from '../inequalities/subject-view';
import { isOnRule } from '../recomputations/claim-problem';
import { PROGRESS_COLUMNS, progressView } from '../recomputations/progress-view';
import { jobsAhead } from '../recomputations/queue-order';
import { problemLabel } from '../recomputations/problem-label';
import { taskMarks } from '../tasks/task-marks';
import { isDisputedClaim } from '../transcriptions/disputed-claims';
import { shortMethod } from './short-method';
import type { Verdict } from '../../../ledger/verdict';

/** The columns of a ledger's row; one join, so that any list can filter and sort by them. */
export function selectClaimRows(read: Reader, where: SQL | undefined) {
	return read
		.select({
			claim: claims,
			inequality: {
				name: inequalities.name,
				nameLatex: inequalities.nameLatex,
				scenario: inequalities.scenario
			},
			reference: { id: references.id, short: references.short, doi: references.doi },
			run: { ...PROGRESS_COLUMNS, problem: recomputations.problem },
			differs: isDisputedClaim
		})
		.from(claims)
		.innerJoin(references, eq(references.id, claims.referenceId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.leftJoin(recomputations, eq(recomputations.id, claims.recomputationId))
		.where(where)
		.$dynamic();
}

export type SelectedClaim = Awaited<ReturnType<typeof selectClaimRows>>[number];

/**
 * What the table shows, for rows in the order given.
 * @param groups whose members look at it: rows of other groups, as the public sees them, show
 * neither tasks nor comparisons nor people's names
 */
export async function claimRows(
	read: Reader,
	selected: readonly SelectedClaim[],
	now: Date,
	groups: readonly string[] = []
): Promise<LedgerRow[]> {
	const ids = selected.flatMap(({ claim }) => (claim.inequalityId ? [claim.inequalityId] : []));
	const stations = await loadStations(read, ids);
	const waits = selected.some(({ run }) => run?.state === 'queued');
	const ahead = waits ? await jobsAhead(read) : null;
	const notices = await noticeKinds(
		read,
		selected.map(({ claim }) => claim.id)
	);
	const viewed = selected.filter(({ claim }) => groups.includes(claim.groupId));
	const marks = await taskMarks(
		read,
		viewed.map(({ claim }) => claim.id),
		dayOf(now)
	);
	const rows: LedgerRow[] = [];
	for (const { claim, inequality, reference, run, differs } of selected) {
		const map = readMap(claim);
		const isOwn = groups.includes(claim.groupId);
		const verdict = isOwn ? claim.verdict : publicVerdict(claim.verdict);
		const disputed = isOwn && differs;
		const task = marks.get(claim.id) ?? null;
		const onRule = isOnRule(claim.input);
		const own = onRule && claim.inequalityId ? (stations.get(claim.inequalityId) ?? []) : [];
		rows.push({
			id: claim.id,
			number: claim.number,
			subject: claimSubject(claim, inequality),
			quantityLabel: claim.quantityLabel,
			relation: claim.relation,
			printed: claim.printed,
			printedHtml: printedHtml(claim.printed),
			verdict,
			recomputedBy: recomputedBy(verdict) ?? (run ? problemLabel(run.problem) : ''),
			stations: own.length > 0 ? stationsView(own, map) : null,
			progress: run && progressView(run, map, now, ahead?.get(run.id)),
			reference: { ...reference, locator: claim.locator },
			state: claim.state,
			visibility: claim.visibility,
			notices: notices.get(claim.id) ?? [],
			disputed,
			task,
			wantsTask: isOwn && task === null && wantsTask(claim.state, verdict, [], disputed)
		});
	}
	return rows;
}

/** Which evidence the verdict rests on, each named once. */
function recomputedBy({ enclosure }: Verdict): string | null {
	if (!enclosure) return null;
	const { lower, upper, lowerLabel, upperLabel } = enclosure;
	const labels = [upper === null ? '' : upperLabel, lower === null ? '' : lowerLabel];
	return [...new Set(labels.filter(Boolean).map(shortMethod))].join(', ') || null;
}
