import { and, eq } from 'drizzle-orm';
import { COMPARED_BY_SECOND, PUBLIC_DISCREPANCY } from '../../../ledger/publication';
import { publicVerdict } from '../../../ledger/public-verdict';
import type { PublicClaimView } from '../../../schemas/views';
import type { Context } from '../../context';
import { claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import { publicNotices } from '../claim-notices/public-notices';
import { isPublicClaim } from '../inequalities/visibility';
import { publicReference } from '../references/public-reference';
import { claimView } from './claim-view';
import { publicHistory } from './history';
import { reproducedAt } from './reproduced-at';

/** @throws ServiceError not-found for a claim that is not public, as if it did not exist */
export async function showPublicClaim(ctx: Context, id: string): Promise<PublicClaimView> {
	const { read } = ctx.db;
	const [claim] = await read
		.select()
		.from(claims)
		.where(and(eq(claims.id, id), isPublicClaim));
	if (!claim) throw new ServiceError('not-found', 'There is no such public claim.');
	const whole = await claimView(read, claim, ctx.now());
	// Fields are listed, not taken away: what is added to the group's view stays private.
	return {
		id: whole.id,
		version: whole.version,
		groupName: whole.groupName,
		subject: whole.subject,
		map: whole.map,
		quantity: whole.quantity,
		quantityLabel: whole.quantityLabel,
		relation: whole.relation,
		printed: whole.printed,
		printedHtml: whole.printedHtml,
		method: whole.method,
		locator: whole.locator,
		state: whole.state,
		visibility: whole.visibility,
		supersededBy: await publicSuccessor(ctx, claim.supersededById),
		verdict: publicVerdict(whole.verdict),
		confirmed: whole.confirmed,
		notices: publicNotices(whole.notices),
		wording: whole.verdict.status === 'discrepancy' ? DISCREPANCY_WORDING : null,
		reproducedAt: await reproducedAt(read, claim),
		stations: whole.stations,
		progress: whole.progress,
		recomputationId: whole.recomputationId,
		recomputations: whole.recomputations,
		reference: publicReference(whole.reference),
		history: await publicHistory(read, claim.id),
		caution: whole.caution,
		enteredAt: whole.enteredAt
	};
}

const DISCREPANCY_WORDING = `It ${PUBLIC_DISCREPANCY}. ${COMPARED_BY_SECOND}`;

/** How many claims a group has is its own business. */
const NO_NUMBER = 0;

async function publicSuccessor(ctx: Context, id: string | null) {
	if (!id) return null;
	const [row] = await ctx.db.read
		.select({ id: claims.id })
		.from(claims)
		.where(and(eq(claims.id, id), isPublicClaim));
	return row ? { id: row.id, number: NO_NUMBER } : null;
}
