import { unknownMentions, type Handle } from '../../ledger/mentions';
import { typeset } from '../math/typeset';
import { MOST_FORMULAS } from './finish-html';
import { markdownTree, plainTexts, type Tree, type TreeNode } from './markdown-tree';
import { isReadable } from './readable';

/** Enough to see what is wrong; a text with more has one cause for most of them. */
const MOST_WARNINGS = 6;
const SHOWN_OF_FORMULA = 60;

/** What its writer may not have meant: mentions of nobody, formulas that can't be set. */
export function textWarnings(text: string, handles: readonly Handle[]): readonly string[] {
	if (!isReadable(text)) return [];
	const tree = markdownTree(text);
	const nobody = unknownMentions(plainTexts(tree).join('\n'), handles).map(
		(typed) => `Nobody in this group is called ${typed}, so nobody is told.`
	);
	const formulas = formulasOf(tree)
		.slice(0, MOST_FORMULAS)
		.filter(({ latex, display }) => typeset(latex, display) === null)
		.map(({ latex }) => `This formula can’t be set and is shown as typed: ${shortened(latex)}`);
	return [...nobody, ...new Set(formulas)].slice(0, MOST_WARNINGS);
}

interface Written {
	readonly latex: string;
	readonly display: boolean;
}

function formulasOf(node: Tree | TreeNode): readonly Written[] {
	if (node.type === 'inlineMath' || node.type === 'math') {
		return [{ latex: node.value, display: node.type === 'math' }];
	}
	return 'children' in node ? node.children.flatMap(formulasOf) : [];
}

function shortened(latex: string): string {
	const characters = Array.from(latex.replace(/\s+/g, ' ').trim());
	if (characters.length <= SHOWN_OF_FORMULA) return characters.join('');
	return `${characters.slice(0, SHOWN_OF_FORMULA - 1).join('')}…`;
}
