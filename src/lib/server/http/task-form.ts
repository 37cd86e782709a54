import { fail, type RequestEvent } from '@sveltejs/kit';
import { TASK_LIMITS } from '../../schemas/task-input';
import { requireRole } from '../auth/guards';
import type { GroupContext } from '../context';
import { ServiceError } from '../errors';
import { failWith } from './action-error';
import { taskNumber } from './route-numbers';

/** A form's text fields by name; of several with one name the last. */
export function typedIn(data: FormData): Record<string, string> {
	const typed: Record<string, string> = {};
	for (const [name, value] of data) if (typeof value === 'string') typed[name] = value;
	return typed;
}

/** What a page says of a form it sends back: which of its forms, what is wrong, what was typed. */
export function refuseTyped(door: string, thrown: unknown, typed: Record<string, string>) {
	const { status, data } = failWith(thrown);
	return fail(status, { refused: { door, ...data, typed } });
}

/**
 * An action of a task's page: guards, does it, and answers with the sentence that says so, or sends
 * the form back.
 */
export function taskAction(
	door: string,
	done: string,
	verb: (ctx: GroupContext, number: number, data: FormData) => Promise<unknown>,
	before?: (event: RequestEvent) => Promise<void>
) {
	return async (event: RequestEvent) => {
		const ctx = await requireRole(event, 'observer');
		const number = taskNumber(event.params.number ?? '');
		const data = await event.request.formData();
		try {
			await before?.(event);
			await verb(ctx, number, data);
		} catch (thrown) {
			return refuseTyped(door, thrown, typedIn(data));
		}
		return { message: done };
	};
}

/** The fields of a submission; a certificate's file counts where nothing is pasted. */
export async function submissionFields(data: FormData): Promise<Record<string, string>> {
	const typed = typedIn(data);
	const file = data.get('certificateFile');
	if (typed.kind !== 'certificate' || typed.certificate?.trim() || !(file instanceof File)) {
		return typed;
	}
	if (file.size > TASK_LIMITS.certificate) {
		const message = `A certificate has at most ${TASK_LIMITS.certificate.toLocaleString('en')} bytes.`;
		throw new ServiceError('too-large', message, [{ field: 'certificate', message }]);
	}
	return { ...typed, certificate: await file.text() };
}
