import { z } from 'zod';
import { COMMENT_SUBJECTS, LONGEST_COMMENT } from '../ledger/comments';

const longest = LONGEST_COMMENT.toLocaleString('en');

/** A form sends every line end as two characters; none of them are the person's. */
export const markdownText = z
	.string()
	.transform((text) => text.replaceAll('\r\n', '\n').trimEnd())
	.pipe(z.string().max(LONGEST_COMMENT, `At most ${longest} characters`));

export const commentBody = markdownText.pipe(
	z.string().refine((text) => text.trim() !== '', 'Write something first')
);

export const addCommentInput = z.object({
	subject: z.enum(COMMENT_SUBJECTS),
	/** Id of the claim, task or inequality. */
	subjectId: z.string().max(64),
	body: commentBody
});
export type AddCommentInput = z.infer<typeof addCommentInput>;

export const editCommentInput = z.object({ id: z.string().max(64), body: commentBody });
