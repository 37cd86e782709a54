import { createHash } from 'node:crypto';
import { findMentions, type Handle, type Mention } from '../../ledger/mentions';
import { Recent } from '../recent';
import { finishHtml } from './finish-html';
import { htmlTree, printHtml } from './html-tree';
import { markdownTree, plainTexts } from './markdown-tree';
import { isReadable } from './readable';

const cache = new Recent<string>(500);

/**
 * Markdown with formulas (between `$` or `$$`) as HTML that is safe to put into a page: no markup
 * of the text's own gets through, links lead outside only as such, and the handles given are
 * marked. A text with more markup than can be set at once, and one longer than a comment, is shown
 * as typed.
 */
export function renderMarkdown(text: string, mentions: readonly Handle[] = []): string {
	const handles = mentions.map(({ handle }) => handle);
	const key = createHash('sha256')
		.update(JSON.stringify([text, handles]))
		.digest('base64url');
	return cache.get(key) ?? cache.keep(key, render(text, mentions));
}

/** Who a text mentions, outside of code, formulas and links. */
export function mentionsIn(text: string, handles: readonly Handle[]): readonly Mention[] {
	if (!text.includes('@') || !isReadable(text)) return [];
	return plainTexts(markdownTree(text)).flatMap((part) => findMentions(part, handles));
}

function render(text: string, mentions: readonly Handle[]): string {
	if (!isReadable(text)) return asTyped(text);
	let tree;
	try {
		tree = htmlTree(markdownTree(text));
	} catch (error) {
		// Nesting that no limit foresaw.
		if (!(error instanceof RangeError)) throw error;
		return asTyped(text);
	}
	return printHtml({ ...tree, children: finishHtml(tree.children, mentions) });
}

function asTyped(value: string): string {
	return printHtml({
		type: 'root',
		children: [
			{
				type: 'element',
				tagName: 'pre',
				properties: {},
				children: [{ type: 'text', value }]
			}
		]
	});
}
