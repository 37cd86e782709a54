import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { SdpaError, parseSdpa, printSdpa, type SdpaProgramme } from './sdpa-text';

/** Any programme that the format can say. */
const programmes: fc.Arbitrary<SdpaProgramme> = fc
	.record({
		variables: fc.integer({ min: 1, max: 4 }),
		blocks: fc.array(
			fc.integer({ min: -4, max: 4 }).filter((size) => size !== 0),
			{ minLength: 1, maxLength: 3 }
		),
		comments: fc.array(fc.constantFrom(' a remark', ' 5 = not a count', '"quoted'), {
			maxLength: 3
		})
	})
	.chain(({ variables, blocks, comments }) => {
		const number = fc.double({ noNaN: true, noDefaultInfinity: true });
		const entry = fc
			.record({
				matrix: fc.nat(variables),
				block: fc.integer({ min: 1, max: blocks.length }),
				rowSeed: fc.nat(),
				columnSeed: fc.nat(),
				value: number
			})
			.map(({ matrix, block, rowSeed, columnSeed, value }) => {
				const size = blocks[block - 1] ?? 1;
				const row = 1 + (rowSeed % Math.abs(size));
				const column = size < 0 ? row : 1 + (columnSeed % size);
				return { matrix, block, row, column, value: value + 0 };
			});
		return fc.record({
			comments: fc.constant(comments),
			blocks: fc.constant(blocks),
			objective: fc.array(
				number.map((x) => x + 0),
				{ minLength: variables, maxLength: variables }
			),
			entries: fc.array(entry, { maxLength: 12 })
		});
	});

describe('SDPA text', () => {
	test('reading what was printed gives the same programme', () => {
		fc.assert(
			fc.property(programmes, (programme) => {
				expect(parseSdpa(printSdpa(programme))).toEqual(programme);
			})
		);
	});

	test("reads the punctuation of the manual's first example", () => {
		// Example 1 of the SDPA user's manual, in sparse form; from memory.
		const text = [
			'"Example 1: mDim = 3, nBLOCK = 1, {2}"',
			'   3  =  mDIM',
			'   1  =  nBLOCK',
			'   2  = bLOCKsTRUCT',
			'{48, -8, 20}',
			'0 1 1 1 -11',
			'0 1 2 2 23',
			'1 1 1 1 10',
			'1 1 1 2 4',
			'2 1 2 2 -8',
			'3 1 1 2 -8',
			'3 1 2 2 -2'
		].join('\n');
		const programme = parseSdpa(text);
		expect(programme.objective).toEqual([48, -8, 20]);
		expect(programme.blocks).toEqual([2]);
		expect(programme.entries[3]).toEqual({ matrix: 1, block: 1, row: 1, column: 2, value: 4 });
	});

	test.each([
		['', 1, /ends before the number of variables/],
		['"only a remark', 1, /ends before/],
		['x\n', 1, /positive whole number/],
		['2\n1\n3\n1\n', 4, /1 entries, not 2/],
		['1\n2\n3\n1\n', 3, /1 block sizes for 2 blocks/],
		['1\n1\n0\n1\n', 3, /no block size/],
		['1\n1\n2\nNaN\n', 4, /not a number/],
		['1\n1\n2\n1\n1 1 1 1\n', 5, /five numbers/],
		['1\n1\n2\n1\n\n2 1 1 1 1\n', 6, /no matrix 2/],
		['1\n1\n2\n1\n1 2 1 1 1\n', 5, /no block 2/],
		['1\n1\n2\n1\n1 1 1 3 1\n', 5, /no row or column 3/],
		['1\n1\n-2\n1\n1 1 1 2 1\n', 5, /diagonal/],
		['1\n1\n2\n1e999\n', 4, /not a number/]
	])('%j is refused with its line', (text, line, message) => {
		let error: unknown = null;
		try {
			parseSdpa(text);
		} catch (caught) {
			error = caught;
		}
		expect(error).toBeInstanceOf(SdpaError);
		if (error instanceof SdpaError) {
			expect(error.line).toBe(line);
			expect(error.message).toMatch(message);
		}
	});

	test('any text is read or refused, never anything else', () => {
		fc.assert(
			fc.property(fc.string({ maxLength: 200 }), (text) => {
				try {
					expect(parseSdpa(text).objective.length).toBeGreaterThan(0);
				} catch (error) {
					expect(error).toBeInstanceOf(SdpaError);
				}
			})
		);
	});
});

test('refuses a text of more than 50 million characters', () => {
	expect(() => parseSdpa('1'.repeat(50_000_001))).toThrow(/longer than 50000000 characters/);
});
