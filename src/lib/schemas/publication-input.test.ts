import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { authorMessageInput, PUBLICATION_LIMITS } from './publication-input';

const fields = (over: object = {}) => ({
	name: 'Mira Arden',
	email: 'mira@institute.example',
	message: 'Table 2 has a misprint.',
	link: '',
	...over
});
const wrongFields = (over: object) =>
	authorMessageInput.safeParse(fields(over)).error?.issues.map(({ path }) => path[0]) ?? [];

describe('an author’s message', () => {
	it('keeps its lines, and its length counts them as one character each', () => {
		const lines = Array.from({ length: PUBLICATION_LIMITS.message / 2 }, () => 'a').join('\r\n');
		const read = authorMessageInput.parse(fields({ message: lines }));
		expect(read.message).toHaveLength(PUBLICATION_LIMITS.message - 1);
		expect(read.message).not.toContain('\r');
	});

	it('has a limit, at n and n + 1', () => {
		const long = 'a'.repeat(PUBLICATION_LIMITS.message);
		expect(wrongFields({ message: long })).toEqual([]);
		expect(wrongFields({ message: `${long}a` })).toEqual(['message']);
	});

	it.each(['10.5555/jip.12', 'doi:10.5555/jip.12', 'https://doi.org/10.5555/jip.12', ''])(
		'takes %j as a link',
		(link) => expect(wrongFields({ link })).toEqual([])
	);

	it.each(['javascript:alert(1)', 'data:text/html,x', '//evil.example', 'see my page', 'https://'])(
		'takes no %j',
		(link) => expect(wrongFields({ link })).toEqual(['link'])
	);

	it('lets no line break or control character into what may reach a mail’s header', () => {
		fc.assert(
			fc.property(
				fc.string(),
				fc.constantFrom('\r', '\n', '\r\n', '\0', '\u2028', '\u0085'),
				fc.string(),
				(before, breaking, after) => {
					const text = `a${before}${breaking}${after}a`;
					expect(wrongFields({ name: text })).toContain('name');
					expect(wrongFields({ email: `${text}@institute.example` })).toContain('email');
				}
			)
		);
	});

	it('has no control characters but line ends and tabs', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary' }), (text) => {
				const read = authorMessageInput.safeParse(fields({ message: `x${text}x` }));
				expect(read.data?.message ?? '').not.toMatch(/[^\P{Cc}\n\t]/u);
			})
		);
	});
});
