import type { MailKind } from '../../ledger/notifications';
import { unsubscribeAddress } from './templates/mail-links';

export type MailHeaders = Readonly<Record<string, string>>;

/**
 * What a mail is, for the programs that handle it.
 * - RFC 3834: made by a program, so no holiday notes in answer.
 * - RFC 2919: the list it belongs to, for filters: one of each group, one of the digests.
 * - RFC 2369 and RFC 8058: the link that turns this kind off, with one click.
 */
export function mailHeaders(
	origin: string,
	kind: MailKind,
	userId: string | null,
	groupSlug: string | null
): MailHeaders {
	const host = new URL(origin).hostname;
	const list = groupSlug === null ? `digest.${host}` : `${groupSlug}.groups.${host}`;
	return {
		'Auto-Submitted': 'auto-generated',
		...(kind !== 'invitation' && { 'List-Id': `<${list}>` }),
		...(kind !== 'invitation' &&
			userId !== null && {
				'List-Unsubscribe': `<${unsubscribeAddress(origin, userId, kind)}>`,
				'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click'
			})
	};
}
