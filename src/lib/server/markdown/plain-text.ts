import { markdownTree, type Tree, type TreeNode } from './markdown-tree';
import { isReadable } from './readable';
import { plainFormula } from './plain-formula';

/**
 * Markdown without its marks, for lines of lists and for mails: formulas in plain characters where
 * they have such, addresses of links in brackets, paragraphs and list items on lines of their own.
 */
export function plainText(text: string): string {
	if (!isReadable(text)) return text.trim();
	try {
		return blocks(markdownTree(text).children, '\n\n').trim();
	} catch (error) {
		// Nesting that no limit foresaw.
		if (!(error instanceof RangeError)) throw error;
		return text.trim();
	}
}

const blocks = (nodes: readonly TreeNode[], between: string) =>
	nodes
		.map(printed)
		.filter((block) => block !== '')
		.join(between);

const inline = (nodes: readonly TreeNode[]): string => nodes.map(printed).join('');

function printed(node: Tree | TreeNode): string {
	switch (node.type) {
		case 'text':
		case 'inlineCode':
		case 'code':
		case 'html':
			return node.value;
		case 'inlineMath':
		case 'math':
			return plainFormula(node.value);
		case 'break':
			return '\n';
		case 'link':
			return linked(inline(node.children), node.url);
		case 'list':
			return node.children
				.map((item, index) => {
					const mark = node.ordered ? `${(node.start ?? 1) + index}.` : '–';
					return `${mark} ${blocks(item.children, '\n')}`;
				})
				.join('\n');
		case 'table':
			return node.children.map(printed).join('\n');
		case 'tableRow':
			return node.children.map(printed).join(' | ');
		case 'root':
		case 'blockquote':
		case 'listItem':
			return blocks(node.children, '\n\n');
		default:
			return 'children' in node ? inline(node.children) : '';
	}
}

function linked(words: string, url: string): string {
	const same = url === words || url === `mailto:${words}` || url === `http://${words}`;
	return same || !/^https?:/i.test(url) ? words : `${words} (${url})`;
}
