import type { RequestEvent } from '@sveltejs/kit';
import { clientAddress } from '../client-address';
import { ServiceError } from '../errors';
import { rateLimit } from '../rate-limit';

const HOUR = 3_600;

const LIMITS = {
	/** The form's panel asks at every pause in typing. */
	reading: rateLimit('reading', 240, 60, 'requests'),
	/** Entering, editing and recomputing: a paper with a long table is entered in an hour. */
	change: rateLimit('change', 240, HOUR, 'claims entered, edited or recomputed in an hour'),
	/** Each goes to somebody who may not have asked for it. */
	invitation: rateLimit('invitation', 50, HOUR, 'invitations in an hour'),
	/** Added, edited and removed ones. */
	comment: rateLimit('comment', 60, HOUR, 'comments in an hour'),
	/** Of a visitor, at the API. */
	anonymous: rateLimit('anonymous', 600, HOUR, 'requests in an hour'),
	/** Written out by a solver thread. */
	programme: rateLimit('programme', 120, HOUR, 'programmes in an hour'),
	/** Of an address, at calendars: a group behind one address, whose programs ask every few minutes. */
	calendar: rateLimit('calendar', 600, HOUR, 'requests in an hour')
} as const;

/**
 * Counts a request against its person, or its address where nobody has signed in.
 * @param times how many of the kind it asks for
 * @throws ServiceError rate-limited; the answer then says when to come again
 */
export async function countRequest(
	event: RequestEvent,
	kind: keyof typeof LIMITS,
	times = 1
): Promise<void> {
	const who = event.locals.actor?.id ?? clientAddress(event);
	await countOrSayWhen(event, () => LIMITS[kind].count(who, times));
}

/** Counts; a refusal's answer says when to come again. */
export async function countOrSayWhen(
	event: RequestEvent,
	count: () => Promise<unknown>
): Promise<void> {
	try {
		await count();
	} catch (thrown) {
		if (thrown instanceof ServiceError && thrown.retryAfterSeconds !== null) {
			event.setHeaders({ 'Retry-After': String(thrown.retryAfterSeconds) });
		}
		throw thrown;
	}
}
