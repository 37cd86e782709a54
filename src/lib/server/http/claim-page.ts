import { may } from '../../ledger/policy';
import { disputing } from '../../ledger/comparison';
import { parseActivityKind } from '../../schemas/activity-query';
import type { GroupContext } from '../context';
import { claimActivity } from '../services/activity/claim-activity';
import { showClaim } from '../services/claims/show-claim';
import { discussionView } from '../services/comments/discussion-view';
import { listAttached } from '../services/submissions/list-attached';
import { claimTasks } from './claim-tasks';
import { loadPublication } from './publication-data';

/**
 * What a claim's page shows: the claim, its way to the public, its tasks, and what is said and was
 * done about it.
 * @param history the kind of activity asked for; null: all
 */
export async function claimPage(ctx: GroupContext, number: number, history: string | null) {
	const claim = await showClaim(ctx, number);
	const historyKind = parseActivityKind(history);
	const publication = await loadPublication(ctx, claim);
	const disputed = disputing(publication.transcription.checks);
	return {
		claim,
		publication,
		/** The comparison that found it to differ from its paper; null: none does. */
		disputed,
		/** What members attached, each accepted by its check. */
		attached: await listAttached(ctx, claim.id),
		mayAttach:
			claim.state !== 'withdrawn' &&
			claim.subject.inequalityId !== null &&
			may(ctx.role, 'attach-certificate'),
		tasks: await claimTasks(ctx, claim, disputed !== null),
		discussion: await discussionView(ctx, 'claim', claim.id),
		activity: await claimActivity(ctx, number, historyKind),
		historyKind,
		role: ctx.role
	};
}
