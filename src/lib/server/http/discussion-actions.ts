import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import type { CommentSubject } from '../../ledger/comments';
import type { RefusedComment } from '../../schemas/talk-views';
import { requireRole } from '../auth/guards';
import type { GroupContext } from '../context';
import { addComment } from '../services/comments/add-comment';
import { editComment } from '../services/comments/edit-comment';
import { removeComment } from '../services/comments/remove-comment';
import { assertAnswerable } from './action-error';
import { countRequest } from './request-limits';

/**
 * The actions of a discussion, spread into those of the page that shows it. Each ends at the
 * comment, so that loading the page again sends nothing twice.
 * @param idOf the subject's id, from the page's address
 */
export function discussionActions<E extends RequestEvent>(
	subject: CommentSubject,
	idOf: (ctx: GroupContext, event: E) => Promise<string> | string
) {
	const action =
		(
			form: string,
			verb: (ctx: GroupContext, event: E, id: string, body: string) => Promise<string>
		) =>
		async (event: E) => {
			const ctx = await requireRole(event, 'observer');
			const data = await event.request.formData();
			const [id, body] = ['id', 'body'].map((name) => String(data.get(name) ?? ''));
			let at: string;
			try {
				await countRequest(event, 'comment');
				at = await verb(ctx, event, id ?? '', body ?? '');
			} catch (thrown) {
				return refused(thrown, form + (id ?? ''), body ?? '');
			}
			redirect(303, `${event.url.pathname}#comment-${at}`);
		};
	return {
		comment: action('', async (ctx, event, _, body) => {
			const subjectId = await idOf(ctx, event);
			return (await addComment(ctx, { subject, subjectId, body })).id;
		}),
		'edit-comment': action('', async (ctx, _, id, body) => {
			await editComment(ctx, id, body);
			return id;
		}),
		'remove-comment': action('remove-', async (ctx, _, id) => {
			await removeComment(ctx, id);
			return id;
		})
	};
}

function refused(thrown: unknown, id: string, body: string) {
	assertAnswerable(thrown);
	const discussion: RefusedComment = { id, body, message: thrown.message };
	return fail(thrown.status, { discussion });
}
