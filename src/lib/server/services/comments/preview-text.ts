import { may } from '../../../ledger/policy';
import { markdownText } from '../../../schemas/comment-input';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { mentionsIn, renderMarkdown } from '../../markdown/render-markdown';
import { textWarnings } from '../../markdown/text-warnings';
import { parseInput } from '../parse-input';
import { MAY_NOT_COMMENT } from './add-comment';
import { groupHandles } from './group-handles';

export interface PreviewedText {
	readonly html: string;
	/** Names of those who would be told. */
	readonly mentions: readonly string[];
	/** What its writer may not have meant. */
	readonly warnings: readonly string[];
}

/** A text as it would be shown; writes nothing. @throws ServiceError forbidden, invalid */
export async function previewText(ctx: GroupContext, text: string): Promise<PreviewedText> {
	if (!may(ctx.role, 'comment')) throw new ServiceError('forbidden', MAY_NOT_COMMENT);
	const body = parseInput(markdownText, text);
	const handles = await groupHandles(ctx.db.read, ctx);
	const mentioned = mentionsIn(body, handles);
	return {
		html: renderMarkdown(body, mentioned),
		mentions: [...new Set(mentioned.map(({ name }) => name))],
		warnings: textWarnings(body, handles)
	};
}
