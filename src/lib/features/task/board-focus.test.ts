import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { cardBeside, tabStop } from './board-focus';

const board = [[1, 2, 3], [], [4], [5, 6]];

describe('arrow keys on the board', () => {
	it.each([
		[2, 'ArrowUp', 1],
		[2, 'ArrowDown', 3],
		[3, 'ArrowDown', null],
		[3, 'ArrowRight', 4],
		[4, 'ArrowRight', 5],
		[6, 'ArrowLeft', 4],
		[1, 'ArrowLeft', null],
		[3, 'Home', 1],
		[1, 'End', 3],
		[1, 'Enter', null],
		[9, 'ArrowDown', null]
	])('from %i by %s lead to %s', (from, key, to) => {
		expect(cardBeside(board, from, key)).toBe(to);
	});

	it('never lead off the board, and down then up is no move', () => {
		const columns = fc
			.uniqueArray(fc.integer({ min: 1, max: 99 }), { minLength: 1, maxLength: 12 })
			.chain((numbers) =>
				fc.tuple(
					fc.constant(numbers),
					fc.array(fc.nat(4), { minLength: numbers.length, maxLength: numbers.length })
				)
			)
			.map(([numbers, at]) => [0, 1, 2, 3, 4].map((c) => numbers.filter((_, i) => at[i] === c)));
		fc.assert(
			fc.property(
				columns,
				fc.constantFrom('ArrowLeft', 'ArrowRight', 'ArrowDown'),
				(cards, key) => {
					for (const from of cards.flat()) {
						const to = cardBeside(cards, from, key);
						if (to !== null) expect(cards.flat()).toContain(to);
						if (to !== null && key === 'ArrowDown')
							expect(cardBeside(cards, to, 'ArrowUp')).toBe(from);
					}
					expect(cards.flat()).toContain(tabStop(cards, null));
				}
			)
		);
	});
});

describe('what Tab reaches', () => {
	it('is the card last on, while it is there', () => {
		expect(tabStop(board, 6)).toBe(6);
		expect(tabStop(board, 9)).toBe(1);
		expect(tabStop([[], []], null)).toBeNull();
	});
});
