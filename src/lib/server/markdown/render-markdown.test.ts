// @vitest-environment jsdom
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { handlesOf } from '../../ledger/mentions';
import { mentionsIn, renderMarkdown } from './render-markdown';
import { XSS_PAYLOADS } from './xss-payloads';

const HANDLES = handlesOf([
	{ id: 'w', name: 'Wren Aldous' },
	{ id: 'i', name: 'Inés Calder' },
	{ id: 'j', name: 'Ines Vale' }
]);

const ALLOWED: Readonly<Record<string, readonly string[]>> = {
	...Object.fromEntries(
		[
			...['P', 'BR', 'HR', 'H4', 'H5', 'H6', 'BLOCKQUOTE', 'UL', 'LI', 'PRE', 'EM', 'STRONG'],
			...['DEL', 'CODE', 'TABLE', 'THEAD', 'TBODY', 'TR']
		].map((name) => [name, []])
	),
	A: ['href', 'rel'],
	OL: ['start'],
	TH: ['align'],
	TD: ['align'],
	SPAN: ['class']
};

/** Whatever in the page is not allowed to a text; a browser's own parser says what is in the page. */
function forbidden(html: string): string[] {
	const { body, head } = new DOMParser().parseFromString(html, 'text/html');
	const found = [...head.children].map(({ tagName }) => `in the head: ${tagName}`);
	for (const element of body.querySelectorAll('*')) {
		// KaTeX's own output, which it makes without `trust`: checked for what runs, not by the list.
		if (element.closest('.katex')) {
			if (/^(SCRIPT|IFRAME|IMG|A|OBJECT|EMBED|LINK|STYLE|FORM)$/i.test(element.tagName)) {
				found.push(`in a formula: ${element.tagName}`);
			}
			for (const { name } of element.attributes) {
				if (/^(on|href|src|xlink|id$|data-)/i.test(name)) found.push(`in a formula: ${name}`);
			}
			continue;
		}
		const names = ALLOWED[element.tagName];
		if (!names) found.push(element.tagName);
		for (const { name, value } of element.attributes) {
			if (element.tagName === 'SPAN' && !/^(mention|katex(-display)?)$/.test(value)) {
				found.push(`class ${value}`);
			}
			if (!names?.includes(name)) found.push(`${element.tagName} ${name}="${value}"`);
			if (name === 'href' && !/^(https?:\/\/[^/@]+(\/[^]*)?|mailto:[^?]+)$/.test(value))
				found.push(value);
			if (name === 'rel' && value !== 'nofollow noopener noreferrer ugc') found.push(value);
		}
	}
	return found;
}

const dom = (text: string, handles = HANDLES) =>
	new DOMParser().parseFromString(renderMarkdown(text, handles), 'text/html').body;

describe('renderMarkdown', () => {
	it('is looked at by a check that finds what is forbidden', () => {
		for (const html of [
			'<img src=x>',
			'<p id=x>',
			'<a href="javascript:x">y</a>',
			'<p onclick=x>'
		]) {
			expect(forbidden(html), html).not.toEqual([]);
		}
	});

	it('has a corpus of at least fifty attacks', () => {
		expect(new Set(XSS_PAYLOADS).size).toBeGreaterThanOrEqual(50);
	});

	it.each(XSS_PAYLOADS)('lets nothing through of %j', (payload) => {
		for (const text of [
			payload,
			`> ${payload}`,
			`- a ${payload}`,
			`**${payload}**`,
			`x\n\n${payload}`
		]) {
			expect(forbidden(renderMarkdown(text, HANDLES))).toEqual([]);
		}
	});

	it('lets nothing through of any text made of the pieces of attacks', () => {
		const pieces = fc.oneof(
			fc.constantFrom(...XSS_PAYLOADS),
			fc.constantFrom(
				'<',
				'>',
				'"',
				"'",
				'`',
				'```',
				'$',
				'$$',
				'[',
				'](',
				')',
				'!',
				'|',
				'\n',
				'@wren'
			),
			fc.string({ unit: 'grapheme', maxLength: 20 })
		);
		fc.assert(
			fc.property(fc.array(pieces, { maxLength: 12 }), (parts) => {
				expect(forbidden(renderMarkdown(parts.join(''), HANDLES))).toEqual([]);
			}),
			{ numRuns: 500 }
		);
	});

	it('shows markup of HTML as the text that was typed', () => {
		expect(dom('if p<q and q>r, <b>then</b>').textContent?.trim()).toBe(
			'if p<q and q>r, <b>then</b>'
		);
	});

	it('sets what Markdown has: emphasis, lists, tables, quotes, code, links', () => {
		const body = dom(
			'# Title\n\n**a** *b* ~~c~~ `d` [e](https://paper.example/x)\n\n- f\n- [x] g\n\n> h\n\n| i | j |\n|--:|---|\n| 1 | 2 |\n'
		);
		expect(body.querySelector('h4')?.textContent).toBe('Title');
		for (const name of ['strong', 'em', 'del', 'code', 'ul', 'blockquote', 'table']) {
			expect(body.querySelector(name), name).not.toBeNull();
		}
		expect(body.querySelector('a')?.getAttribute('href')).toBe('https://paper.example/x');
		expect(body.querySelector('th')?.getAttribute('align')).toBe('right');
		expect(body.textContent).toContain('☑ g');
	});

	it('typesets formulas, and shows one that fails as its source', () => {
		expect(dom('so $2\\sqrt{2}$').querySelector('.katex annotation')?.textContent).toBe(
			'2\\sqrt{2}'
		);
		expect(dom('$$\nx^2\n$$').querySelector('.katex-display')).not.toBeNull();
		expect(dom('$\\nonsense{$').querySelector('code')?.textContent).toBe('$\\nonsense{$');
	});

	it('keeps the words of an image and of a footnote', () => {
		expect(dom('![a plot](https://x.example/p.png)').innerHTML).toContain('>a plot</a>');
		const text = dom('As said[^1].\n\n[^1]: In the appendix.').textContent;
		expect(text).toContain('As said[1].');
		expect(text).toContain('[1] In the appendix.');
	});

	it('marks who is mentioned, but not in code, links, formulas and addresses', () => {
		const text =
			'@wren and @ines-vale, not `@wren` [@wren](https://x.example) wren@wren.example $@wren$ @nobody';
		const found = [...dom(text).querySelectorAll('.mention')].map((span) => span.textContent);
		expect(found).toEqual(['@wren', '@ines-vale']);
		expect(mentionsIn(text, HANDLES).map(({ id }) => id)).toEqual(['w', 'j']);
	});

	it('marks exactly whom it says are mentioned, in any text', () => {
		const pieces = fc.constantFrom(
			...[
				'@wren',
				'@ines-calder',
				' ',
				'\n',
				'\n\n',
				'`',
				'*',
				'[',
				'](https://x.example)',
				'<b>',
				'>'
			],
			...['$', 'a', '.', '@', '-', '    ', '|', '~~~']
		);
		fc.assert(
			fc.property(fc.array(pieces, { maxLength: 20 }), (parts) => {
				const text = parts.join('');
				const marked = dom(text).querySelectorAll('.mention');
				const said = mentionsIn(text, HANDLES).map(({ start, end }) => end - start);
				expect([...marked].map((span) => span.textContent?.length)).toEqual(said);
			}),
			{ numRuns: 500 }
		);
	});

	it('shows a text with more markup than anybody writes as typed', () => {
		const bomb = '> '.repeat(4_000);
		expect(dom(bomb).querySelector('pre')?.textContent).toBe(bomb);
	});
});
