import { findMentions, type Handle } from '../../ledger/mentions';
import { typeset } from '../math/typeset';
import type { HtmlNode } from './html-tree';
import { safeLink } from './safe-link';

/** Enough for a derivation; KaTeX takes up to a millisecond for each. The others stay as typed. */
export const MOST_FORMULAS = 40;
const MOST_FORMULA_TEXT = 4_000;

/** Nobody's link here is a recommendation, and where it leads learns nothing of the page. */
const REL = ['nofollow', 'noopener', 'noreferrer', 'ugc'];

/**
 * What comes after sanitising: formulas are typeset, mentions marked, links made safe. Only this
 * puts HTML that is not escaped into the tree, and it is KaTeX's.
 */
export function finishHtml(nodes: readonly HtmlNode[], mentions: readonly Handle[]): HtmlNode[] {
	const formulas = { count: 0, text: 0 };
	const finish = (node: HtmlNode): HtmlNode[] => {
		if (node.type === 'text') return marked(node.value, mentions);
		if (node.type !== 'element') return [];
		const classes = node.properties.className;
		const isFormula = Array.isArray(classes) && classes.some((name) => name !== 'mention');
		if (node.tagName === 'span' && isFormula) {
			return [formula(textOf(node), classes.includes('formula-display'), formulas)];
		}
		if (node.tagName === 'code' || node.tagName === 'pre') return [node];
		if (node.tagName === 'a') {
			const href = safeLink(String(node.properties.href ?? ''));
			const children = finishHtml(node.children, []) as typeof node.children;
			if (href === null) return children;
			return [{ ...node, properties: { href, rel: REL }, children }];
		}
		return [{ ...node, children: node.children.flatMap(finish) as typeof node.children }];
	};
	return nodes.flatMap(finish);
}

function formula(latex: string, display: boolean, so: { count: number; text: number }): HtmlNode {
	so.count++;
	so.text += latex.length;
	const within = so.count <= MOST_FORMULAS && so.text <= MOST_FORMULA_TEXT;
	const html = within ? typeset(latex, display) : null;
	if (html !== null) return { type: 'raw', value: html };
	const sign = display ? '$$' : '$';
	return element('code', {}, `${sign}${latex}${sign}`);
}

function marked(text: string, handles: readonly Handle[]): HtmlNode[] {
	const nodes: HtmlNode[] = [];
	let done = 0;
	for (const { start, end } of findMentions(text, handles)) {
		nodes.push({ type: 'text', value: text.slice(done, start) });
		nodes.push(element('span', { className: ['mention'] }, text.slice(start, end)));
		done = end;
	}
	return [...nodes, { type: 'text', value: text.slice(done) }];
}

function element(
	tagName: string,
	properties: { className?: string[] },
	text: string
): Extract<HtmlNode, { type: 'element' }> {
	return { type: 'element', tagName, properties, children: [{ type: 'text', value: text }] };
}

function textOf(node: HtmlNode): string {
	if (node.type === 'text') return node.value;
	return 'children' in node ? node.children.map(textOf).join('') : '';
}
