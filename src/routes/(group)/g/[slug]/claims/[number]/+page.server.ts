import { parseActivityKind } from '$lib/schemas/activity-query';
import { requireRole } from '$lib/server/auth/guards';
import { failWith } from '$lib/server/http/action-error';
import { assignAction, claimTasks } from '$lib/server/http/claim-tasks';
import { discussionActions } from '$lib/server/http/discussion-actions';
import { answering } from '$lib/server/http/page-errors';
import { loadPublication } from '$lib/server/http/publication-data';
import { publicationActions } from '$lib/server/http/publication-actions';
import { countRequest } from '$lib/server/http/request-limits';
import { claimNumber } from '$lib/server/http/route-numbers';
import { claimActivity } from '$lib/server/services/activity/claim-activity';
import { findClaim } from '$lib/server/services/claims/find-claim';
import { proposeClaim } from '$lib/server/services/claims/propose-claim';
import { publishClaim } from '$lib/server/services/claims/publish-claim';
import { recomputeClaim } from '$lib/server/services/claims/recompute-claim';
import { restoreClaim } from '$lib/server/services/claims/restore-claim';
import { showClaim } from '$lib/server/services/claims/show-claim';
import { supersedeClaim } from '$lib/server/services/claims/supersede-claim';
import { unpublishClaim } from '$lib/server/services/claims/unpublish-claim';
import { withdrawClaim } from '$lib/server/services/claims/withdraw-claim';
import { discussionView } from '$lib/server/services/comments/discussion-view';
import { cancelRecomputation } from '$lib/server/services/recomputations/cancel-recomputation';
import { recheckCertificate } from '$lib/server/services/recomputations/recheck-certificate';
import type { GroupContext } from '$lib/server/context';
import type { Action, Actions, PageServerLoad, RequestEvent } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	event.depends('merestone:claim');
	const number = claimNumber(event.params.number);
	const claim = await answering(() => showClaim(ctx, number));
	const discussion = await answering(() => discussionView(ctx, 'claim', claim.id));
	const publication = await answering(() => loadPublication(ctx, claim));
	const historyKind = parseActivityKind(event.url.searchParams.get('history'));
	const tasks = await claimTasks(ctx, claim);
	const activity = await answering(() => claimActivity(ctx, number, historyKind));
	return { claim, discussion, publication, tasks, activity, historyKind, role: ctx.role };
};

/** `12` or `#12`; NaN for what is no number, which no claim has. */
function numberTyped(value: FormDataEntryValue | null): number {
	const digits = /^#?([1-9]\d{0,8})$/.exec(String(value ?? '').trim())?.[1];
	return digits ? Number(digits) : NaN;
}

/** Guards, does it, and answers with the sentence that says so. */
function doing(
	done: string,
	verb: (ctx: GroupContext, number: number, data: FormData) => Promise<void>,
	before?: (event: RequestEvent) => Promise<void>
): Action {
	return async (event) => {
		const ctx = await requireRole(event, 'observer');
		const number = claimNumber(event.params.number);
		try {
			await before?.(event);
			await verb(ctx, number, await event.request.formData());
		} catch (thrown) {
			return failWith(thrown);
		}
		return { message: done };
	};
}

export const actions: Actions = {
	...discussionActions('claim', async (ctx, { params }) => {
		const claim = await findClaim(ctx.db.read, ctx, claimNumber(params.number ?? ''));
		return claim.id;
	}),
	recompute: doing('Queued again.', recomputeClaim, (event) => countRequest(event, 'change')),
	withdraw: doing('Withdrawn. It stays in the ledger, struck through.', withdrawClaim),
	restore: doing('Restored.', restoreClaim),
	supersede: doing('Superseded.', (ctx, number, data) =>
		supersedeClaim(ctx, number, numberTyped(data.get('by')))
	),
	propose: doing('Proposed. A maintainer decides.', proposeClaim),
	publish: doing('Public now.', publishClaim),
	unpublish: doing('Only the group sees it now.', unpublishClaim),
	cancel: doing('Cancelled.', (ctx, _number, data) =>
		cancelRecomputation(ctx, String(data.get('id')))
	),
	assign: assignAction,
	confirm: publicationActions.confirm,
	attachNotice: publicationActions.attachNotice,
	removeNotice: publicationActions.removeNotice,
	handleMessage: publicationActions.handleMessage,
	reopenMessage: publicationActions.reopenMessage,
	recheck: async (event) => {
		const ctx = await requireRole(event, 'observer');
		const id = String((await event.request.formData()).get('id'));
		try {
			return { recheck: { id, outcome: await recheckCertificate(ctx, id) } };
		} catch (thrown) {
			return failWith(thrown);
		}
	}
};
