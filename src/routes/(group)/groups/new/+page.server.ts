import { startGroupInput } from '$lib/schemas/group';
import { requireUser } from '$lib/server/auth/guards';
import { failForm } from '$lib/server/http/action-error';
import { startGroup } from '$lib/server/services/groups/start-group';
import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	requireUser(event);
	return { form: await superValidate(zod4(startGroupInput)) };
};

export const actions: Actions = {
	default: async (event) => {
		const ctx = requireUser(event);
		const form = await superValidate(event.request, zod4(startGroupInput));
		if (!form.valid) return fail(400, { form });
		let slug: string;
		try {
			({ slug } = await startGroup(ctx, form.data));
		} catch (thrown) {
			return failForm(form, thrown);
		}
		redirect(303, `/g/${slug}`);
	}
};
