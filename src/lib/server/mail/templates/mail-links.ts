import type { MailFooter } from '../mail-content';
import { unsubscribeToken, type Unsubscribable } from '../../services/notifications/unsubscribe';

export const unsubscribeAddress = (origin: string, userId: string, kind: Unsubscribable) =>
	`${origin}/unsubscribe/${unsubscribeToken(userId, kind)}`;

/** Why somebody with an account gets a mail, and the two ways to change that. */
export function footerFor(
	origin: string,
	userId: string,
	kind: Unsubscribable,
	why: string
): MailFooter {
	return {
		why,
		choices: `${origin}/account/notifications`,
		unsubscribe: unsubscribeAddress(origin, userId, kind)
	};
}
