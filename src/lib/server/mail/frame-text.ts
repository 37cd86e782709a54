import type { MailContent, MailSection } from './mail-content';

/** Columns: room for a quote mark or two in an answer within 80. Common practice, no source. */
export const WRAP = 72;

export function frameText(content: MailContent): string {
	const { heading, figures = [], paragraphs, list, quote, facts = [], sections = [] } = content;
	const blocks: string[][] = [
		[content.tag.text, ...wrap(heading)],
		columns(figures.map(({ label, value }) => [label, value])),
		...paragraphs.map((paragraph) => wrap(paragraph)),
		list && list.items.length > 0
			? [`${list.title}:`, ...list.items.flatMap((item) => wrap(item, '  - ', '    '))]
			: [],
		quote ? [`${quote.title}:`, ...quoted(quote.text)] : [],
		columns(facts),
		...sections.map(sectionText),
		[`${content.action.label}:`, content.action.address],
		footer(content)
	];
	return blocks
		.filter((block) => block.length > 0)
		.map((block) => block.join('\n'))
		.join('\n\n');
}

function footer({ footer: { why, choices, unsubscribe } }: MailContent): string[] {
	return [
		// RFC 3676: what follows is no part of the message proper.
		'-- ',
		...wrap(why),
		...(choices ? ['Choose what comes by mail:', choices] : []),
		...(unsubscribe ? ['No more of these:', unsubscribe] : [])
	];
}

function columns(rows: readonly (readonly [string, string])[]): string[] {
	const width = Math.max(0, ...rows.map(([label]) => label.length));
	return rows.flatMap(([label, value]) =>
		wrap(value, `  ${label.padEnd(width)}  `, ' '.repeat(width + 4))
	);
}

function sectionText({ title, parts }: MailSection): string[] {
	return [
		title,
		'='.repeat(Math.min(WRAP, title.length)),
		...parts.flatMap((part) => [
			'',
			part.title,
			...part.items.flatMap(({ text, detail, address }) => [
				...wrap(text, '  - ', '    '),
				...(detail ? wrap(detail, '    ') : []),
				`    ${address}`
			])
		])
	];
}

/** RFC 3676 quoting, line by line. */
function quoted(text: string): string[] {
	return text.split(/\r\n|\r|\n/).flatMap((line) => wrap(line, '> ', '> '));
}

/** Breaks at spaces only: an address or a long number stays whole. */
export function wrap(paragraph: string, first = '', rest = first.replace(/./g, ' ')): string[] {
	const words = paragraph.trim().split(/\s+/);
	const lines: string[] = [];
	let prefix = first;
	let line = '';
	for (const word of words) {
		if (line !== '' && prefix.length + line.length + 1 + word.length > WRAP) {
			lines.push(prefix + line);
			prefix = rest;
			line = word;
		} else line += (line === '' ? '' : ' ') + word;
	}
	return [...lines, (prefix + line).trimEnd()];
}
