/** Why a form was not stored, where its action could not answer by itself. */
export interface WhyNotSent {
	/** The session ended: signing in elsewhere mends it. */
	readonly signedOut: boolean;
	/** A sentence without its full stop; empty when signed out. */
	readonly reason: string;
}

/** Reads the error that takes the place of an action's answer. */
export function whyNotSent(result: {
	readonly status?: number | undefined;
	readonly error?: unknown;
}): WhyNotSent {
	if (result.status === 401) return { signedOut: true, reason: '' };
	// Without a status there was no answer.
	if (!result.status) return { signedOut: false, reason: 'the server can’t be reached' };
	const { error } = result;
	const message: unknown = error && typeof error === 'object' && Reflect.get(error, 'message');
	return {
		signedOut: false,
		reason: typeof message === 'string' ? message.replace(/\.$/, '') : 'an error of ours'
	};
}
