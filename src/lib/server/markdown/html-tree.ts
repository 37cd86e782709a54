import rehypeSanitize from 'rehype-sanitize';
import rehypeStringify from 'rehype-stringify';
import remarkRehype from 'remark-rehype';
import { unified } from 'unified';
import { ALLOWED_HTML } from './allowed-html';
import type { Tree } from './markdown-tree';

interface Formula {
	readonly value: string;
}

const formulaAs = (className: string) => (_: unknown, node: Formula) => ({
	type: 'element' as const,
	tagName: 'span',
	properties: { className: [className] },
	children: [{ type: 'text' as const, value: node.value }]
});

const toHtml = unified()
	.use(remarkRehype, {
		handlers: { inlineMath: formulaAs('formula'), math: formulaAs('formula-display') }
	})
	.use(rehypeSanitize, ALLOWED_HTML)
	.freeze();

/** Whatever a text held is escaped here; `raw` nodes are made by us, after sanitising. */
const printer = unified().use(rehypeStringify, { allowDangerousHtml: true }).freeze();

export type HtmlTree = Parameters<typeof printer.stringify>[0];
export type HtmlNode = HtmlTree['children'][number];

/** The elements of a tree of Markdown, sanitised. */
export function htmlTree(tree: Tree): HtmlTree {
	return toHtml.runSync(tree);
}

export function printHtml(tree: HtmlTree): string {
	return printer.stringify(tree);
}
