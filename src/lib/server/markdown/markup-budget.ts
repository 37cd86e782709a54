/**
 * How much markup a text may hold. Parsing takes time that grows with the square of some of these
 * counts, and depth of some costs stack. Measured on 10,000 characters with nothing but one kind:
 * setext underlines 0.9 s, emphasis runs 0.6 s, `>` a stack overflow after 0.9 s, and a table of
 * 300 columns and 2,500 short rows 7.5 MB of HTML. Below these limits each stays under 50 ms, and
 * no text that somebody would write comes near them.
 */
const MOST: readonly { readonly what: RegExp; readonly count: number }[] = [
	{ what: /\n/g, count: 1_500 },
	{ what: /\*+|_+|~+/g, count: 500 },
	{ what: /[[\]]/g, count: 500 },
	{ what: /</g, count: 500 },
	{ what: /`+/g, count: 500 },
	{ what: /\$+/g, count: 400 },
	{ what: /@|www\.|https?:/gi, count: 200 },
	// Headings and rules.
	{ what: /^[ \t>]*(#{1,6}|-+|=+)[ \t]/gm, count: 300 },
	{ what: /^[ \t>]*(-+|=+)[ \t]*$/gm, count: 100 },
	// A line that starts with a block within a block.
	{ what: /^[ \t]*(>|[-+*]|\d{1,9}[.)])[ \t]*(>|[-+*]|\d{1,9}[.)])/gm, count: 200 }
];

/** Quotes and lists within one another, and how far a line may be indented. */
const DEEPEST = 12;
const WIDEST_INDENT = 60;

/** Cells of a table, counting the empty ones that short rows are filled up with. */
const MOST_CELLS = 1_500;

/** Whether a text holds no more markup than can be set at once; else it is shown as typed. */
export function isWithinBudget(text: string): boolean {
	if (MOST.some(({ what, count }) => countOf(text, what) > count)) return false;
	const lines = text.split('\n');
	let columns = 0;
	for (const line of lines) {
		const indent = /^[ \t]*/.exec(line)?.[0].replaceAll('\t', '    ') ?? '';
		if (indent.length > WIDEST_INDENT) return false;
		const opening =
			/^(?:[ \t]*(?:>|[-+*](?=[ \t]|$)|\d{1,9}[.)](?=[ \t]|$)))*/.exec(line)?.[0] ?? '';
		if (countOf(opening, />|[-+*]|[.)]/g) > DEEPEST) return false;
		if (/^[ \t>]*[|:-][ \t|:-]*$/.test(line)) columns = Math.max(columns, countOf(line, /\|/g) + 1);
	}
	return columns * lines.length <= MOST_CELLS || columns <= 1;
}

function countOf(text: string, what: RegExp): number {
	return text.match(what)?.length ?? 0;
}
