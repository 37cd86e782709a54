import { error, fail, type ActionFailure } from '@sveltejs/kit';
import {
	setError,
	setMessage,
	type FormPathLeavesWithErrors,
	type SuperValidated
} from 'sveltekit-superforms';
import { ServiceError, type FieldIssue } from '../errors';

/** Lets pass what an action answers itself; the rest goes on to the error page. */
export function assertAnswerable(thrown: unknown): asserts thrown is ServiceError {
	if (!(thrown instanceof ServiceError)) throw thrown;
	if (thrown.code === 'not-found') error(404, thrown.message);
}

/**
 * For actions without a Superforms form: `{ message, issues }` beside what was typed.
 * Errors that are not a service's go on to the error page.
 */
export function failWith(
	thrown: unknown
): ActionFailure<{ message: string; issues: readonly FieldIssue[] }> {
	assertAnswerable(thrown);
	return fail(thrown.status, { message: thrown.message, issues: thrown.issues });
}

/** For actions with a Superforms form: issues beside their fields, the rest as its message. */
export function failForm<T extends Record<string, unknown>>(
	form: SuperValidated<T, string>,
	thrown: unknown
) {
	if (!(thrown instanceof ServiceError)) throw thrown;
	const status = thrown.status as 400;
	const known = thrown.issues.filter(({ field }) => field in form.data);
	for (const { field, message } of known) {
		setError(form, field as FormPathLeavesWithErrors<T>, message);
	}
	if (known.length > 0) return fail(status, { form });
	return setMessage(form, thrown.message, { status });
}
