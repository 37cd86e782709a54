import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { renderMail } from './frame';
import { WRAP, wrap } from './frame-text';
import { headerText } from './header-text';
import type { MailContent } from './mail-content';

const anyText = fc.string({ unit: 'binary', maxLength: 300 });

function content(text: string): MailContent {
	return {
		subject: text,
		tag: { text, tone: 'plain' },
		heading: text,
		figures: [{ label: text, value: text, strong: true }],
		paragraphs: [text],
		list: { title: text, items: [text] },
		quote: { title: text, text },
		facts: [[text, text]],
		sections: [
			{ title: text, parts: [{ title: text, items: [{ text, detail: text, address: text }] }] }
		],
		action: { label: text, address: text },
		footer: { why: text, choices: text, unsubscribe: text }
	};
}

describe('a header', () => {
	it('is one line without control characters, whatever it is made of', () => {
		fc.assert(
			fc.property(anyText, (text) => {
				const line = headerText(text);
				expect(line).not.toMatch(/[\p{Cc}\u2028\u2029\u202a-\u202e\u2066-\u2069]/u);
				expect(Array.from(line).length).toBeLessThanOrEqual(150);
			})
		);
		expect(headerText('Heron\r\nBcc: all@reading.example')).toBe('Heron Bcc: all@reading.example');
	});
});

describe('a mail', () => {
	it('as HTML has no tag or attribute that a value made', () => {
		const tags = (html: string) =>
			[...html.matchAll(/<([a-z0-9!/]+)/gi)].map(([, name]) => name).join(' ');
		const plain = tags(renderMail(content('word')).html);
		fc.assert(
			fc.property(anyText, (text) => {
				// Line breaks of somebody's own words are the only markup a value brings.
				const { html } = renderMail(content(`x${text.replace(/[\r\n]/g, ' ')}`));
				expect(tags(html)).toBe(plain);
			})
		);
		const { html } = renderMail(content(`"><img src=x onerror=alert(1)>'`));
		expect(tags(html)).toBe(plain);
		expect(html).not.toMatch(/=\s*["'][^"']*["']\s*onerror/);
	});

	it('keeps the line breaks of somebody’s own words', () => {
		const { html, text } = renderMail(content('one\ntwo'));
		expect(html).toContain('one<br>two');
		expect(text).toContain('> one\n> two');
	});

	it('as text ends with what is no part of it (RFC 3676)', () => {
		const { text } = renderMail(content('word'));
		expect(text).toContain('\n\n-- \nword\n');
	});
});

describe('a wrapped line', () => {
	it('has all words in their order, and is longer than 72 only where a word is', () => {
		const words = fc.array(fc.stringMatching(/^[a-z]{1,90}$/), { minLength: 1, maxLength: 40 });
		fc.assert(
			fc.property(words, fc.constantFrom('', '  - ', '> '), (each, first) => {
				const lines = wrap(each.join(' '), first, first === '> ' ? '> ' : undefined);
				const back = lines.map((line) => line.slice(Math.min(first.length, line.length)));
				expect(back.join(' ').split(/\s+/)).toEqual(each);
				for (const line of lines) {
					expect(line.length <= WRAP || !line.slice(first.length).includes(' ')).toBe(true);
				}
			})
		);
	});
});
