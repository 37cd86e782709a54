import { requireRole } from '$lib/server/auth/guards';
import {
	askToSignIn,
	claimFormChoices,
	claimFormOf,
	claimFormStart,
	NO_CHOICES,
	readClaimForm,
	readOnly,
	refuseClaim,
	refuseInvalid,
	signInWithinForm
} from '$lib/server/http/claim-form';
import { answering } from '$lib/server/http/page-errors';
import { countRequest } from '$lib/server/http/request-limits';
import { isFormSentBySignedOut } from '$lib/server/http/signed-out-form';
import { enterClaim } from '$lib/server/services/claims/enter-claim';
import { redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	if (isFormSentBySignedOut(event)) return { form: await claimFormOf({}), ...NO_CHOICES };
	const ctx = await requireRole(event, 'member');
	const start = await answering(() => claimFormStart(ctx, event.url.searchParams));
	const form = await claimFormOf(start);
	const choices = await answering(() =>
		claimFormChoices(ctx, form.data, Object.keys(start).length > 0)
	);
	return { form, ...choices };
};

export const actions: Actions = {
	enter: async (event) => {
		const data = await event.request.formData();
		const form = await readClaimForm(data);
		if (!event.locals.actor) return askToSignIn(form);
		const ctx = await requireRole(event, 'member');
		const read = await readOnly(ctx, form, data);
		if (read) return read;
		if (!form.valid) return refuseInvalid(form);
		let number: number;
		try {
			await countRequest(event, 'change');
			({ number } = await enterClaim(ctx, form.data));
		} catch (thrown) {
			return refuseClaim(form, thrown);
		}
		const claims = `/g/${ctx.group.slug}/claims`;
		const another = data.get('then') === 'another';
		redirect(303, another ? `${claims}/new?from=${number}` : `${claims}/${number}`);
	},
	signIn: async (event) => signInWithinForm(event, await event.request.formData())
};
