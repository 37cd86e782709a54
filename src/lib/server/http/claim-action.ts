import type { RequestEvent } from '@sveltejs/kit';
import { requireRole } from '../auth/guards';
import type { GroupContext } from '../context';
import { recheckCertificate } from '../services/recomputations/recheck-certificate';
import { failWith } from './action-error';
import { claimNumber } from './route-numbers';

/** An action of a claim's page: guards, does it, and answers with the sentence that says so. */
export function claimAction(
	done: string,
	verb: (ctx: GroupContext, number: number, data: FormData) => Promise<void>,
	before?: (event: RequestEvent) => Promise<void>
) {
	return async (event: RequestEvent) => {
		const ctx = await requireRole(event, 'observer');
		const number = claimNumber(event.params.number ?? '');
		try {
			await before?.(event);
			await verb(ctx, number, await event.request.formData());
		} catch (thrown) {
			return failWith(thrown);
		}
		return { message: done };
	};
}

/** Checks the certificate of one of the page's recomputations once more, while one looks. */
export async function recheckAction(event: RequestEvent) {
	const ctx = await requireRole(event, 'observer');
	const id = String((await event.request.formData()).get('id'));
	try {
		return { recheck: { id, outcome: await recheckCertificate(ctx, id) } };
	} catch (thrown) {
		return failWith(thrown);
	}
}
