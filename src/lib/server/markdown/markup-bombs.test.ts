import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { LONGEST_COMMENT } from '../../ledger/comments';
import { renderMarkdown } from './render-markdown';

/**
 * Longer would hold up everybody else's requests noticeably. They take less than 50 ms on an idle
 * machine of two cores, and up to 1.4 s in the plain parser: between the two, for slower machines.
 */
const MOST_MS = 250;
/** No answer grows out of proportion to what was sent. */
const MOST_HTML = 600_000;

const full = (piece: string) => piece.repeat(Math.floor(LONGEST_COMMENT / piece.length));
const rows = (count: number, row: (i: number) => string) =>
	Array.from({ length: count }, (_, i) => row(i))
		.join('\n')
		.slice(0, LONGEST_COMMENT);

const BOMBS: Readonly<Record<string, string>> = {
	...Object.fromEntries(
		[
			...[
				'>',
				'> ',
				'- ',
				'1. ',
				'> - ',
				'*',
				'*a ',
				'*a_ ',
				'*_',
				'a**b',
				'_a_*',
				'**a *b ',
				'~a~~b '
			],
			...[
				'[',
				'[]',
				'[a](',
				'[a][b]',
				'![',
				'![[]()',
				'[^a]',
				'[^a]: ',
				'`',
				'<',
				'<a ',
				'<!--',
				'&'
			],
			...[
				'$',
				'$x$ ',
				'$x^2$ ',
				'$$',
				'|',
				'a@b.',
				'a@b.c ',
				'www.',
				'http://',
				'\\',
				'@wren ',
				'\u0300'
			],
			...[
				'# a\n',
				'a\n-\n',
				'a\n=\n',
				'>a\n',
				'> > > > > > > > > > a\n',
				'- - - - a\n',
				'\n',
				'\t',
				'a\n',
				'* * *\n'
			]
		].map((piece) => [JSON.stringify(piece), full(piece)])
	),
	'growing code fences': rows(140, (i) => '`'.repeat(i)),
	'growing formulas': rows(140, (i) => `${'$'.repeat(i)} `),
	'a stair of lists': rows(140, (i) => `${' '.repeat(i)}- a`),
	'a wide table': `${'|a'.repeat(2_000)}\n${'|-'.repeat(2_000)}\n|b`,
	'a wide table of short rows': `${'|a'.repeat(300)}\n${'|-'.repeat(300)}\n${'|b\n'.repeat(2_500)}`,
	'a long table': `|a|b|\n|-|-|\n${'|x|y|\n'.repeat(1_600)}`,
	'many definitions': rows(800, (i) => `[a${i}]: /x`),
	'a formula of braces': `$${'{'.repeat(4_000)}${'}'.repeat(4_000)}$`,
	'a formula that grows': `$${'\\def\\a{\\b\\b}\\def\\b{\\c\\c}\\def\\c{xx}'}${'\\a'.repeat(600)}$`,
	'long formulas': rows(6, (i) => `$${'\\frac{1}{'.repeat(120)}x${'}'.repeat(120)}${i}$`)
};

/** CPU time of the fastest of three runs: other programmes on the machine do not count. */
function fastest(text: string): { ms: number; html: string } {
	let ms = Infinity;
	let html = '';
	for (let run = 0; run < 3; run++) {
		const before = process.cpuUsage();
		// Another text each time: the cache would answer.
		html = renderMarkdown(text.slice(0, LONGEST_COMMENT - 2) + '\n'.repeat(run));
		const { user, system } = process.cpuUsage(before);
		ms = Math.min(ms, (user + system) / 1000);
	}
	return { ms, html };
}

describe('a text made to take long', () => {
	renderMarkdown('# warm\n\n*up* `with` $x^2$\n\n| a |\n|---|\n| b |\n\n> [c](https://x.example)');

	it.each(Object.entries(BOMBS))('such as %s is set in time', (_, text) => {
		const { ms, html } = fastest(text);
		expect(ms).toBeLessThan(MOST_MS);
		expect(html.length).toBeLessThan(MOST_HTML);
	});

	it('out of any pieces of markup is set in time', () => {
		const piece = fc.string({
			unit: fc.constantFrom(...'*_~[]()!<>`$|#-=+1.@:\\ \na'),
			minLength: 1,
			maxLength: 6
		});
		fc.assert(
			fc.property(piece, (text) => {
				const { ms, html } = fastest(full(text));
				expect(ms).toBeLessThan(MOST_MS);
				expect(html.length).toBeLessThan(MOST_HTML);
			}),
			{ numRuns: 150 }
		);
	}, 60_000);
});
