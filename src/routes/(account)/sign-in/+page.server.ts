import { localPath, signInInput } from '$lib/schemas/account';
import { enter } from '$lib/server/auth/enter';
import { clientAddress } from '$lib/server/client-address';
import { contextOf, publicContext } from '$lib/server/auth/guards';
import { landingPath } from '$lib/server/auth/landing';
import { failForm } from '$lib/server/http/action-error';
import { invitedAddress } from '$lib/server/services/invitations/find-invitation';
import { signIn } from '$lib/server/services/users/sign-in';
import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = publicContext(event);
	const next = event.url.searchParams.get('next') ?? '';
	const start = { next, email: await invitedAddress(ctx, next) };
	const form = await superValidate(start, zod4(signInInput), { errors: false });
	if (event.locals.actor) redirect(303, localPath(form.data.next) ?? (await landingPath(event)));
	return { form };
};

export const actions: Actions = {
	default: async (event) => {
		const ctx = contextOf(event);
		const form = await superValidate(event.request, zod4(signInInput));
		const { data } = form;
		// A password never travels back to the page.
		form.data = { ...data, password: '' };
		if (!form.valid) return fail(400, { form });
		try {
			await enter(event, await signIn(ctx, data, clientAddress(event)));
		} catch (thrown) {
			return failForm(form, thrown);
		}
		redirect(303, localPath(data.next) ?? (await landingPath(event)));
	}
};
