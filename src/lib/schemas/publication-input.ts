import { z } from 'zod';
import { NOTICE_KINDS } from '../ledger/notices';
import { emailAddress, oneLine } from './account';

export const PUBLICATION_LIMITS = {
	/** A line on what an erratum or newer version changes. */
	noticeNote: 300,
	bibtex: 20_000,
	/** Errata and newer versions of one claim; a paper with more is known to be unusual. */
	notices: 10,
	message: 5_000,
	link: 500
} as const;

/** Room for as many characters as BibTeX has, and for the sentence that says it is too long. */
const longText = (limit: number) =>
	z
		.string()
		.trim()
		.max(limit, `At most ${limit.toLocaleString('en')} characters`)
		.default('');

/** Text of several lines: line ends as one character, other control characters dropped. */
const paragraphs = z.string().transform((text) =>
	text
		.replace(/\r\n?|[\u2028\u2029]/g, '\n')
		.replace(/[^\P{Cc}\n\t]/gu, '')
		.trim()
);

/** A paper of the group, or the BibTeX of one. */
export const noticeInput = z.object({
	kind: z.enum(NOTICE_KINDS).default('erratum'),
	referenceId: z.string().max(40).default(''),
	bibtex: longText(PUBLICATION_LIMITS.bibtex),
	note: longText(PUBLICATION_LIMITS.noticeNote)
});
export type NoticeInput = z.infer<typeof noticeInput>;

/** `10.5555/x`, `doi:10.5555/x`, `https://doi.org/10.5555/x`, or any other address. */
const DOI_OR_ADDRESS = /^(doi:\s?)?10\.\d{4,9}\/\S+$|^https?:\/\/[^\s/]+\.\S+$/i;

/** What an author writes about a published claim. */
export const authorMessageInput = z.object({
	name: oneLine(100, 'Give your name'),
	email: emailAddress,
	message: paragraphs.pipe(
		z
			.string()
			.min(1, 'Write your message')
			.max(
				PUBLICATION_LIMITS.message,
				`At most ${PUBLICATION_LIMITS.message.toLocaleString('en')} characters; put the rest behind a link`
			)
	),
	link: z
		.string()
		.trim()
		.max(PUBLICATION_LIMITS.link, `At most ${PUBLICATION_LIMITS.link} characters`)
		.regex(
			new RegExp(`^$|${DOI_OR_ADDRESS.source}`, 'i'),
			'Give a DOI such as 10.5555/12345, or an address that starts with https://'
		)
		.default('')
});
export type AuthorMessageInput = z.input<typeof authorMessageInput>;

/** The form has one more field, which no person sees: what fills it in is a program. */
export const authorMessageForm = authorMessageInput.extend({
	remark: z.string().max(10_000).default('')
});
