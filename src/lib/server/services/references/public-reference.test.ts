import { describe, expect, it } from 'vitest';
import { withoutPrivateFields } from './public-reference';

describe('an entry for the public', () => {
	it('loses the notes of whoever collected it, and nothing else', () => {
		const entry = `@article{x,
  author = {Arden, Mira},
  annote = {my {nested, braced} = remark},
  title  = {A {CHSH}, note = here},
  file = "a, b.pdf",
  year   = 2004,
  note = {last}
}`;
		const shown = withoutPrivateFields(entry);
		expect(shown).not.toMatch(/remark|pdf|last/);
		expect(shown).toContain('author = {Arden, Mira}');
		expect(shown).toContain('title  = {A {CHSH}, note = here}');
		expect(shown).toContain('year   = 2004');
	});

	it('ends on broken text too', () => {
		expect(withoutPrivateFields('@misc{x, note = {')).not.toContain('note');
		expect(withoutPrivateFields('')).toBe('');
	});
});
