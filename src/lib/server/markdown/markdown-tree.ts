import remarkGfm from 'remark-gfm';
import remarkMath from 'remark-math';
import remarkParse from 'remark-parse';
import { unified } from 'unified';

const parser = unified().use(remarkParse).use(remarkGfm).use(remarkMath).freeze();

export type Tree = ReturnType<typeof parser.parse>;
export type TreeNode = Tree['children'][number];
type Of<T extends TreeNode['type']> = Extract<TreeNode, { type: T }>;

/** The page's own headings end at the third level. */
const HEADINGS_BELOW = 3;

/**
 * A text as a tree of Markdown in which nothing fetches: images are links to them, markup of HTML
 * is the text that was typed, footnotes stand where they were written.
 */
export function markdownTree(text: string): Tree {
	const tree = parser.parse(text);
	tree.children = tamed(tree.children);
	return tree;
}

/** The plain texts of a tree, without code, formulas and links. */
export function plainTexts(node: Tree | TreeNode): readonly string[] {
	if (node.type === 'text') return [node.value];
	if (node.type === 'link' || !('children' in node)) return [];
	return node.children.flatMap(plainTexts);
}

function tamed(nodes: readonly TreeNode[]): TreeNode[] {
	return nodes.flatMap((node) => {
		const instead = replacement(node);
		for (const parent of instead) {
			if ('children' in parent) parent.children = tamed(parent.children) as typeof parent.children;
		}
		return instead;
	});
}

function replacement(node: TreeNode): TreeNode[] {
	switch (node.type) {
		case 'html':
			return [words(node.value)];
		case 'heading':
			node.depth = Math.min(6, node.depth + HEADINGS_BELOW) as typeof node.depth;
			return [node];
		case 'image':
			return [{ type: 'link', url: node.url, children: [words(node.alt || node.url)] }];
		case 'imageReference':
			return [words(node.alt ?? node.label ?? '')];
		case 'footnoteReference':
			return [words(`[${node.label ?? node.identifier}]`)];
		case 'footnoteDefinition':
			return labelled(`[${node.label ?? node.identifier}] `, node.children);
		case 'listItem':
			// A box to tick would do nothing.
			if (typeof node.checked === 'boolean') {
				node.children = labelled(node.checked ? '☑ ' : '☐ ', node.children);
				node.checked = null;
			}
			return [node];
		default:
			return [node];
	}
}

const words = (value: string): Of<'text'> => ({ type: 'text', value });

type Blocks = Of<'listItem'>['children'];

function labelled(label: string, blocks: Blocks): Blocks {
	const [first, ...rest] = blocks;
	if (first?.type !== 'paragraph') {
		return [{ type: 'paragraph', children: [words(label)] }, ...blocks];
	}
	return [{ ...first, children: [words(label), ...first.children] }, ...rest];
}
