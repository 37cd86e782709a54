import { describe, expect, it } from 'vitest';
import { parseExpression } from '../../../nonlocality/scenario/expression';
import { canonicalSubject } from './canonical-subject';

const read = (expression: string) => canonicalSubject(parseExpression(expression).functional);

describe('where a functional belongs', () => {
	it('is the same for other names of the inputs and another scale, with the map between', () => {
		const chsh = read('A0 B0 + A0 B1 + A1 B0 - A1 B1');
		const turned = read('2 A1 B0 + 2 A1 B1 + 2 A0 B0 - 2 A0 B1 + 1');
		expect(turned.digest).toBe(chsh.digest);
		expect(turned.scale).not.toBe(chsh.scale);
	});

	it('is worked out once for a form that is read again at every pause in typing', () => {
		// Six parties take the search a good part of a second.
		const mermin = 'A0 B0 C0 + A0 B1 C1 + A1 B0 C1 - A1 B1 C0';
		expect(read(mermin)).toBe(read(mermin));
		expect(read(`${mermin} + 1`)).not.toBe(read(mermin));
	});
});
