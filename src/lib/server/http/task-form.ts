import { fail, type RequestEvent } from '@sveltejs/kit';
import { requireRole } from '../auth/guards';
import type { GroupContext } from '../context';
import { failWith } from './action-error';
import { taskNumber } from './route-numbers';
import { typedIn } from './typed-in';

/** What a page says of a form it sends back: which of its forms, what is wrong, what was typed. */
export function refuseTyped(door: string, thrown: unknown, typed: Record<string, string>) {
	const { status, data } = failWith(thrown);
	return fail(status, { refused: { door, ...data, typed } });
}

/**
 * An action of a task's page: guards, does it, and answers with the sentence that says so, or sends
 * the form back. What the verb answers may add to the sentence.
 */
export function taskAction<Answer>(
	door: string,
	done: string | ((answer: Answer) => string),
	verb: (ctx: GroupContext, number: number, data: FormData) => Promise<Answer>,
	before?: (event: RequestEvent) => Promise<void>
) {
	return async (event: RequestEvent) => {
		const ctx = await requireRole(event, 'observer');
		const number = taskNumber(event.params.number ?? '');
		const data = await event.request.formData();
		try {
			await before?.(event);
			const answer = await verb(ctx, number, data);
			return { message: typeof done === 'string' ? done : done(answer) };
		} catch (thrown) {
			return refuseTyped(door, thrown, typedIn(data));
		}
	};
}

/** The version of the task that the page showed; undefined for a form that does not say. */
export function seenIn(data: FormData): number | undefined {
	return data.has('version') ? Number(data.get('version')) : undefined;
}

/** Why it is returned, cancelled or accepted. */
export function reasonIn(data: FormData): string {
	return String(data.get('reason') ?? '');
}
