import { changePasswordInput } from '$lib/schemas/account';
import { requireUser } from '$lib/server/auth/guards';
import { clientAddress } from '$lib/server/client-address';
import { failForm, failWith } from '$lib/server/http/action-error';
import { listFeeds } from '$lib/server/services/calendar/list-feeds';
import { listGroupsOf } from '$lib/server/services/groups/list-groups-of';
import { changePassword } from '$lib/server/services/users/change-password';
import { endOwnSession, endSessionsElsewhere } from '$lib/server/services/users/end-sessions';
import { listSessions } from '$lib/server/services/users/list-sessions';
import { fail } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = requireUser(event);
	return {
		id: ctx.actor.id,
		name: ctx.actor.name,
		email: ctx.actor.email,
		memberships: await listGroupsOf(ctx),
		feeds: await listFeeds(ctx),
		sessions: await listSessions(ctx, event.locals.sessionId),
		form: await superValidate(zod4(changePasswordInput))
	};
};

export const actions: Actions = {
	password: async (event) => {
		const ctx = requireUser(event);
		const form = await superValidate(event.request, zod4(changePasswordInput));
		const { data } = form;
		form.data = { current: '', password: '' };
		if (!form.valid) return fail(400, { form });
		const sessionId = event.locals.sessionId ?? '';
		try {
			await changePassword(ctx, data, { sessionId, address: clientAddress(event) });
		} catch (thrown) {
			return failForm(form, thrown);
		}
		return message(form, 'Your password is changed; you are signed out everywhere else.');
	},
	end: async (event) => {
		const ctx = requireUser(event);
		const data = await event.request.formData();
		try {
			await endOwnSession(ctx, String(data.get('session')));
		} catch (thrown) {
			return failWith(thrown);
		}
		return { ended: 'That session has ended.' };
	},
	endOthers: async (event) => {
		await endSessionsElsewhere(requireUser(event), event.locals.sessionId ?? '');
		return { ended: 'You are signed out everywhere else.' };
	}
};
