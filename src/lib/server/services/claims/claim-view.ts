import { eq } from 'drizzle-orm';
import { isConfirmed } from '../../../ledger/publication';
import type { ClaimView } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { claims, groups, inequalities, recomputations, references, users } from '../../db/schema';
import { ServiceError } from '../../errors';
import { printedHtml } from '../../math/printed-html';
import { noticesOf } from '../claim-notices/notices-of';
import { readMap } from '../inequalities/affine';
import { loadStations, stationsView } from '../inequalities/stations-view';
import { claimSubject } from '../inequalities/subject-view';
import { isOnRule, quantityInfo } from '../recomputations/claim-problem';
import { PROGRESS_COLUMNS, progressView } from '../recomputations/progress-view';
import { jobsAhead } from '../recomputations/queue-order';
import { recomputationViews, stationsAnd } from '../recomputations/recomputation-view';
import { referenceView } from '../references/reference-view';
import type { ClaimRow } from './find-claim';

/** The whole page of one claim, in the normalisation it was entered in. */
export async function claimView(
	read: Reader,
	claim: ClaimRow,
	now: Date
): Promise<Omit<ClaimView, 'own' | 'history'>> {
	const [joined] = await read
		.select({
			group: { slug: groups.slug, name: groups.name },
			enteredBy: users.name,
			reference: references,
			inequality: {
				name: inequalities.name,
				nameLatex: inequalities.nameLatex,
				scenario: inequalities.scenario,
				latex: inequalities.latex
			},
			run: PROGRESS_COLUMNS
		})
		.from(claims)
		.innerJoin(groups, eq(groups.id, claims.groupId))
		.innerJoin(users, eq(users.id, claims.createdBy))
		.innerJoin(references, eq(references.id, claims.referenceId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.leftJoin(recomputations, eq(recomputations.id, claims.recomputationId))
		.where(eq(claims.id, claim.id));
	if (!joined) throw new ServiceError('not-found', 'This claim is gone.');
	const { inequality, run } = joined;
	const map = readMap(claim);
	const info = quantityInfo(claim.input.quantity);
	// Maxima of the functional stand beside those of the nested sets; a visibility or a rate does not.
	const inequalityId = info.subject === 'functional' ? claim.inequalityId : null;
	const stations = inequalityId
		? ((await loadStations(read, [inequalityId])).get(inequalityId) ?? [])
		: [];
	const own = claim.recomputationId ? [claim.recomputationId] : [];
	const ahead = run?.state === 'queued' ? (await jobsAhead(read)).get(run.id) : null;
	return {
		id: claim.id,
		number: claim.number,
		version: claim.version,
		groupSlug: joined.group.slug,
		groupName: joined.group.name,
		subject: claimSubject(claim, inequality),
		map: mapOf(claim, inequality?.name ?? null),
		quantity: claim.quantity,
		quantityLabel: claim.quantityLabel,
		relation: claim.relation,
		printed: claim.printed,
		printedHtml: printedHtml(claim.printed),
		method: claim.method,
		locator: claim.locator,
		note: claim.note,
		state: claim.state,
		visibility: claim.visibility,
		supersededBy: await supersededBy(read, claim),
		verdict: claim.verdict,
		confirmed: isConfirmed(claim),
		notices: await noticesOf(read, claim.id),
		stations: stations.length > 0 && isOnRule(claim.input) ? stationsView(stations, map) : null,
		progress: run && progressView(run, map, now, ahead),
		recomputationId: claim.recomputationId,
		recomputations: await recomputationViews(read, stationsAnd(inequalityId, own), map, now),
		reference: referenceView(joined.reference),
		input: claim.input,
		caution: info.caution,
		enteredBy: joined.enteredBy,
		enteredAt: claim.createdAt.toISOString()
	};
}

function mapOf({ scale, shift }: ClaimRow, name: string | null): ClaimView['map'] {
	if (scale === '1' && shift === '0') return null;
	return { scale, shift, name: name ?? 'the form first entered' };
}

async function supersededBy(
	read: Reader,
	{ supersededById }: ClaimRow
): Promise<ClaimView['supersededBy']> {
	if (!supersededById) return null;
	const [row] = await read
		.select({ number: claims.number, id: claims.id })
		.from(claims)
		.where(eq(claims.id, supersededById));
	return row ?? null;
}
