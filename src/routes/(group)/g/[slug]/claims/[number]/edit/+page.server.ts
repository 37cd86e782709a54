import { requireRole } from '$lib/server/auth/guards';
import {
	askToSignIn,
	claimFormChoices,
	claimFormOf,
	keepVersion,
	NO_CHOICES,
	readClaimForm,
	readOnly,
	refuseClaim,
	refuseInvalid,
	signInWithinEdit
} from '$lib/server/http/claim-form';
import { answering } from '$lib/server/http/page-errors';
import { countRequest } from '$lib/server/http/request-limits';
import { claimNumber } from '$lib/server/http/route-numbers';
import { isFormSentBySignedOut } from '$lib/server/http/signed-out-form';
import { editClaim, MAY_NOT_EDIT } from '$lib/server/services/claims/edit-claim';
import { showClaim } from '$lib/server/services/claims/show-claim';
import { may } from '$lib/ledger/policy';
import { error, redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const number = claimNumber(event.params.number);
	if (isFormSentBySignedOut(event))
		return { form: await claimFormOf({}), ...NO_CHOICES, number, version: 0 };
	const ctx = await requireRole(event, 'member');
	const { input, version, reference, own } = await answering(() => showClaim(ctx, number));
	if (!may(ctx.role, 'edit-claim', { own })) error(403, MAY_NOT_EDIT);
	const paper = { paper: 'known', referenceId: reference.id, bibtex: '' } as const;
	const form = await claimFormOf({ ...input, ...paper });
	const choices = await answering(() => claimFormChoices(ctx, form.data, true));
	return { form, ...choices, number, version };
};

export const actions: Actions = {
	save: async (event) => {
		const number = claimNumber(event.params.number);
		const data = await event.request.formData();
		const version = Number(data.get('version'));
		const form = await readClaimForm(data);
		if (!event.locals.actor) return keepVersion(askToSignIn(form), version);
		const ctx = await requireRole(event, 'member');
		const read = await readOnly(ctx, form, data);
		if (read) return { ...read, version };
		if (!form.valid) return keepVersion(refuseInvalid(form), version);
		try {
			await countRequest(event, 'change');
			await editClaim(ctx, number, version, form.data);
		} catch (thrown) {
			return keepVersion(refuseClaim(form, thrown), version);
		}
		redirect(303, `/g/${ctx.group.slug}/claims/${number}?changed`);
	},
	signIn: signInWithinEdit
};
