import { requireRole } from '$lib/server/auth/guards';
import { discussionActions } from '$lib/server/http/discussion-actions';
import { leadOn } from '$lib/server/http/moved';
import { answering } from '$lib/server/http/page-errors';
import { discussionView } from '$lib/server/services/comments/discussion-view';
import { movedForGroup } from '$lib/server/services/inequalities/moved-inequality';
import { showInequality } from '$lib/server/services/inequalities/show-inequality';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	leadOn(event, event.params.id, await movedForGroup(ctx, event.params.id));
	const normalisation = event.url.searchParams.get('as') ?? undefined;
	return {
		inequality: await answering(() => showInequality(ctx, event.params.id, normalisation)),
		discussion: await answering(() => discussionView(ctx, 'inequality', event.params.id)),
		role: ctx.role
	};
};

export const actions: Actions = discussionActions('inequality', (_, { params }) => params.id ?? '');
