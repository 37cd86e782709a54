import { may } from '../../../ledger/policy';
import { markdownText } from '../../../schemas/comment-input';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { mentionsIn, renderMarkdown } from '../../markdown/render-markdown';
import { parseInput } from '../parse-input';
import { MAY_NOT_COMMENT } from './add-comment';
import { groupHandles } from './group-handles';

/** A text as it would be shown; writes nothing. @throws ServiceError forbidden, invalid */
export async function previewText(
	ctx: GroupContext,
	text: string
): Promise<{ readonly html: string; readonly mentions: readonly string[] }> {
	if (!may(ctx.role, 'comment')) throw new ServiceError('forbidden', MAY_NOT_COMMENT);
	const body = parseInput(markdownText, text);
	const mentioned = mentionsIn(body, await groupHandles(ctx.db.read, ctx));
	return {
		html: renderMarkdown(body, mentioned),
		mentions: [...new Set(mentioned.map(({ name }) => name))]
	};
}
