import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { authorMessageForm } from '../../schemas/publication-input';
import { publicContext } from '../auth/guards';
import { clientAddress } from '../client-address';
import { securityEvent } from '../log';
import { rateLimit } from '../rate-limit';
import { sendAuthorMessage } from '../services/author-messages/send-author-message';
import { failForm } from './action-error';
import { countOrSayWhen } from './request-limits';

/**
 * Of one address, signed in or not: each message is mailed to several people who did not ask for
 * it. An author with more to say than this has room in the text. Common practice, no source.
 */
const MESSAGES_AN_HOUR = 5;
const messages = rateLimit('authorMessage', MESSAGES_AN_HOUR, 3_600, 'messages in an hour');

/** An empty form. */
export function authorAnswerForm() {
	return superValidate(zod4(authorMessageForm), { errors: false });
}

/**
 * Takes an author's answer to a public claim and leads to the thanks. What a program filled in is
 * thanked for too, and dropped, so that it learns nothing.
 */
export async function takeAuthorAnswer(event: RequestEvent, claimId: string) {
	const ctx = publicContext(event);
	const form = await superValidate(event.request, zod4(authorMessageForm));
	const { remark, ...message } = form.data;
	if (remark) {
		securityEvent('honeypot', { route: event.route.id, request: ctx.requestId });
		redirect(303, `${event.url.pathname}?sent=1`);
	}
	if (!form.valid) return fail(400, { form });
	try {
		await countOrSayWhen(event, () => messages.count(clientAddress(event)));
		await sendAuthorMessage(ctx, claimId, message);
	} catch (thrown) {
		return failForm(form, thrown);
	}
	redirect(303, `${event.url.pathname}?sent=1`);
}
