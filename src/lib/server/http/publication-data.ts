import { may } from '../../ledger/policy';
import type { AuthorMessageView } from '../../schemas/task-views';
import type { ClaimView } from '../../schemas/views';
import type { GroupContext } from '../context';
import { listAuthorMessages } from '../services/author-messages/list-author-messages';
import { listReferences } from '../services/references/list-references';
import {
	showTranscription,
	type ShownTranscription
} from '../services/transcriptions/show-transcription';

export interface PublicationData {
	readonly transcription: ShownTranscription;
	readonly mayAttach: boolean;
	/** Papers to choose from; empty for who attaches nothing. */
	readonly papers: readonly { readonly id: string; readonly formatted: string }[];
	/** What authors wrote; null for who may not read it. */
	readonly messages: readonly AuthorMessageView[] | null;
}

/** What a claim's page shows of its way to the public, beside the claim itself. */
export async function loadPublication(
	ctx: GroupContext,
	claim: ClaimView
): Promise<PublicationData> {
	const mayAttach = may(ctx.role, 'attach-notice', { own: claim.own });
	const papers = mayAttach ? await listReferences(ctx) : [];
	return {
		transcription: await showTranscription(ctx, claim.number),
		mayAttach,
		papers: papers
			.filter(({ id }) => id !== claim.reference.id)
			.map(({ id, formatted }) => ({ id, formatted })),
		messages: may(ctx.role, 'handle-author-message')
			? await listAuthorMessages(ctx, claim.number)
			: null
	};
}
