import { requireRole } from '$lib/server/auth/guards';
import { attachAction } from '$lib/server/http/attach-action';
import { claimAction, recheckAction } from '$lib/server/http/claim-action';
import { claimPage } from '$lib/server/http/claim-page';
import { assignAction } from '$lib/server/http/claim-tasks';
import { discussionActions } from '$lib/server/http/discussion-actions';
import { answering } from '$lib/server/http/page-errors';
import { publicationActions } from '$lib/server/http/publication-actions';
import { countRequest } from '$lib/server/http/request-limits';
import { claimNumber, typedNumber } from '$lib/server/http/route-numbers';
import { findClaim } from '$lib/server/services/claims/find-claim';
import { proposeClaim } from '$lib/server/services/claims/propose-claim';
import { publishClaim } from '$lib/server/services/claims/publish-claim';
import { recomputeClaim } from '$lib/server/services/claims/recompute-claim';
import { restoreClaim } from '$lib/server/services/claims/restore-claim';
import { supersedeClaim } from '$lib/server/services/claims/supersede-claim';
import { unpublishClaim } from '$lib/server/services/claims/unpublish-claim';
import { withdrawClaim } from '$lib/server/services/claims/withdraw-claim';
import { cancelRecomputation } from '$lib/server/services/recomputations/cancel-recomputation';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	event.depends('merestone:claim');
	const number = claimNumber(event.params.number);
	return answering(() => claimPage(ctx, number, event.url.searchParams.get('history')));
};

export const actions: Actions = {
	...discussionActions('claim', async (ctx, { params }) => {
		const claim = await findClaim(ctx.db.read, ctx, claimNumber(params.number ?? ''));
		return claim.id;
	}),
	recompute: claimAction('Queued again.', recomputeClaim, (event) => countRequest(event, 'change')),
	withdraw: claimAction('Withdrawn. It stays in the ledger, struck through.', withdrawClaim),
	restore: claimAction('Restored.', restoreClaim),
	supersede: claimAction('Superseded.', (ctx, number, data) =>
		supersedeClaim(ctx, number, typedNumber(String(data.get('by') ?? '')))
	),
	propose: claimAction('Proposed. A maintainer decides.', proposeClaim),
	publish: claimAction('Public now.', publishClaim),
	unpublish: claimAction('Only the group sees it now.', unpublishClaim),
	cancel: claimAction('Cancelled.', (ctx, _number, data) =>
		cancelRecomputation(ctx, String(data.get('id')))
	),
	assign: assignAction,
	attach: attachAction,
	confirm: publicationActions.confirm,
	attachNotice: publicationActions.attachNotice,
	removeNotice: publicationActions.removeNotice,
	handleMessage: publicationActions.handleMessage,
	reopenMessage: publicationActions.reopenMessage,
	recheck: recheckAction
};
