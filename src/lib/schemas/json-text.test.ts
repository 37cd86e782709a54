import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { JSON_DEPTH, JsonTextError, parseJsonText } from './json-text';

/** Where a text goes wrong, by our own reader. */
function placeOf(text: string): number {
	try {
		parseJsonText(text);
	} catch (error) {
		if (error instanceof JsonTextError) return error.position;
		throw error;
	}
	return -1;
}

describe('parseJsonText', () => {
	// JSON.parse, the standard's own reader, is the reference.
	it('reads what JSON.stringify writes, as JSON.parse does', () => {
		fc.assert(
			fc.property(fc.jsonValue({ maxDepth: 6 }), fc.constantFrom(0, 1, '\t'), (value, space) => {
				const text = JSON.stringify(value, null, space);
				expect(parseJsonText(text)).toEqual(JSON.parse(text));
			})
		);
	});

	it('refuses what JSON.parse refuses, and nothing else, after any one edit', () => {
		const sample = '{"a": [1, -2.5e3, true, null, "x\\u00e9\\n"], "b": {"c": []}}';
		fc.assert(
			fc.property(
				fc.nat(sample.length),
				fc.constantFrom(
					'',
					'"',
					'{',
					'}',
					'[',
					']',
					',',
					':',
					'0',
					'-',
					'.',
					'e',
					't',
					'\\',
					'\u0007'
				),
				fc.nat(2),
				(at, inserted, removed) => {
					const text = sample.slice(0, at) + inserted + sample.slice(at + removed);
					let known = true;
					try {
						JSON.parse(text);
					} catch {
						known = false;
					}
					expect(placeOf(text) === -1).toBe(known);
				}
			),
			{ numRuns: 2_000 }
		);
	});

	it.each([
		['', 0, 'The text ends where a value should be (line 1, column 1)'],
		['{"a": 1,\n "b" 2}', 14, '(line 2, column 6)'],
		['[1, 2', 5, 'The text ends'],
		['{a: 1}', 1, '"a: 1}" is no JSON: here should be a name in double quotes or }'],
		["{'a': 1}", 1, 'double quotes'],
		['[1,]', 3, 'Here should be a value'],
		['{"a": NaN}', 6, 'is no JSON'],
		['{"a": 1} x', 9, 'nothing more'],
		['{"a": 1, "a": 2}', 9, 'The name "a" occurs twice']
	])('says where %j goes wrong', (text, position, message) => {
		expect(placeOf(text)).toBe(position);
		expect(() => parseJsonText(text)).toThrow(message);
	});

	it('stops at a depth no result has, whatever the size', () => {
		expect(placeOf('['.repeat(JSON_DEPTH) + ']'.repeat(JSON_DEPTH))).toBe(-1);
		expect(placeOf('['.repeat(2_000_000))).toBe(JSON_DEPTH);
	});

	it('takes long texts in their stride', () => {
		expect(parseJsonText(`"${'\\n'.repeat(1_000_000)}"`)).toHaveLength(1_000_000);
		expect(placeOf(`"${'\\n'.repeat(900_000)}`)).toBe(0);
	});
});
