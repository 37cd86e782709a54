import { groupSettingsInput } from '$lib/schemas/group';
import { requireRole } from '$lib/server/auth/guards';
import { failForm } from '$lib/server/http/action-error';
import { answering } from '$lib/server/http/page-errors';
import { changeSettings } from '$lib/server/services/groups/change-settings';
import { showSettings } from '$lib/server/services/groups/show-settings';
import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'maintainer');
	const settings = await answering(() => showSettings(ctx));
	const { name, description, budgetSeconds, slug, version } = settings;
	const filled = { name, description, slug, version, budgetSeconds: String(budgetSeconds ?? '') };
	const form = await superValidate(filled, zod4(groupSettingsInput), { errors: false });
	return { form, settings, saved: event.url.searchParams.has('saved') };
};

export const actions: Actions = {
	save: async (event) => {
		const ctx = await requireRole(event, 'maintainer');
		const form = await superValidate(event.request, zod4(groupSettingsInput));
		if (!form.valid) return fail(400, { form });
		let slug: string;
		try {
			({ slug } = await changeSettings(ctx, form.data));
		} catch (thrown) {
			// Whoever saves again has read what it was changed to.
			form.data.version = (await showSettings(ctx)).version;
			return failForm(form, thrown);
		}
		redirect(303, `/g/${slug}/settings?saved`);
	}
};
