import { isHttpError, isRedirect } from '@sveltejs/kit';
import { ServiceError, type FieldIssue } from '../errors';
import { newId } from '../ids';
import { log } from '../log';

const TITLES: Readonly<Record<number, string>> = {
	400: 'The input is not usable',
	401: 'Sign in first',
	403: 'Not allowed',
	404: 'Not found',
	405: 'Method not allowed',
	409: 'In conflict with the current state',
	411: 'Length required',
	412: 'Changed in the meantime',
	413: 'Too large',
	415: 'Not JSON',
	422: 'The input is not usable',
	429: 'Too many requests',
	500: 'An error of ours',
	503: 'Not available right now'
};

export interface Problem {
	readonly status: number;
	readonly detail: string;
	readonly issues?: readonly FieldIssue[];
	/** Id of the error in the log. */
	readonly id?: string;
	readonly retryAfterSeconds?: number | null;
}

/** Problem details as RFC 9457 defines them; `errors` holds what is wrong with which field. */
export function problemResponse(problem: Problem): Response {
	const { status, detail, issues = [], id, retryAfterSeconds } = problem;
	const body = {
		type: 'about:blank',
		title: TITLES[status] ?? 'Error',
		status,
		detail,
		...(id && { instance: `urn:uuid:${id}` }),
		...(issues.length > 0 && { errors: issues })
	};
	const headers = new Headers({ 'Content-Type': 'application/problem+json; charset=utf-8' });
	if (retryAfterSeconds != null) headers.set('Retry-After', String(retryAfterSeconds));
	return new Response(JSON.stringify(body), { status, headers });
}

/** The answer to whatever an endpoint threw; what was not meant for the caller stays in the log. */
export function problemOf(thrown: unknown): Response {
	if (isRedirect(thrown)) throw thrown;
	if (thrown instanceof ServiceError) {
		const { status, message, issues, retryAfterSeconds } = thrown;
		return problemResponse({ status, detail: message, issues, retryAfterSeconds });
	}
	if (isHttpError(thrown)) {
		return problemResponse({ status: thrown.status, detail: thrown.body.message });
	}
	const id = newId();
	log().error({ id, err: thrown }, 'unexpected error in an endpoint');
	return problemResponse({ status: 500, detail: `An error of ours; it is logged as ${id}.`, id });
}
