import { fail, type RequestEvent } from '@sveltejs/kit';
import type { Role } from '../../ledger/roles';
import { requireRole } from '../auth/guards';
import type { GroupContext } from '../context';
import { failWith } from './action-error';
import { typedIn } from './typed-in';

/** The text of a field; empty when the form has none of that name. */
type ReadField = (name: string) => string;

/**
 * An action of a group's page: guards, reads the form's text fields, and answers what the work
 * returns. What a service refuses comes back as `{ message, issues }`, with what was typed.
 */
export function groupAction<T>(
	atLeast: Role,
	work: (ctx: GroupContext, field: ReadField, event: RequestEvent) => Promise<T>
) {
	return async (event: RequestEvent) => {
		const ctx = await requireRole(event, atLeast);
		const typed = typedIn(await event.request.formData());
		try {
			return await work(ctx, (name) => typed[name] ?? '', event);
		} catch (thrown) {
			const { status, data } = failWith(thrown);
			return fail(status, { ...data, typed });
		}
	};
}
