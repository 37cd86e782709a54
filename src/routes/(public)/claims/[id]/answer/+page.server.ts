import { publicContext } from '$lib/server/auth/guards';
import { authorAnswerForm, takeAuthorAnswer } from '$lib/server/http/author-answer';
import { answering } from '$lib/server/http/page-errors';
import { showPublicClaim } from '$lib/server/services/claims/show-public-claim';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const claim = await answering(() => showPublicClaim(publicContext(event), event.params.id));
	const { id, groupName, quantityLabel, relation, printed, printedHtml, subject, locator } = claim;
	return {
		claim: { id, groupName, quantityLabel, relation, printed, printedHtml, subject, locator },
		paper: { title: claim.reference.title, short: claim.reference.short },
		wording: claim.wording,
		form: await authorAnswerForm(),
		sent: event.url.searchParams.has('sent')
	};
};

export const actions: Actions = {
	// Whoever it is writes as a visitor: the verb takes publicContext, and nothing of a session.
	default: (event) => takeAuthorAnswer(event, event.params.id)
};
