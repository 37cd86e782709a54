/**
 * The product's main job against values that papers print: each is judged as `check-claim` judges
 * it. published-values.json names the source of each, says where in it, whether it was read there
 * (`readInTheSource`) or comes from memory, and whether its identifier does.
 */
import { describe, expect, it } from 'vitest';
import { SLOW_CLAIMS, publishedValues, verdictOf, type PublishedValue } from './published-values';

/** Seconds for a claim that does not say, and for each value it is compared with. */
const SECONDS = 10;
const STATIONS = { each: 2, quantum: 2 };
const TIMEOUT = 90_000;

describe('published values', () => {
	const judged = publishedValues.filter(({ id }) => !Object.hasOwn(SLOW_CLAIMS, id));

	it('judges all but the ones listed, and knows where each comes from', () => {
		expect(publishedValues.length).toBeGreaterThan(150);
		expect(new Set(publishedValues.map(({ id }) => id)).size).toBe(publishedValues.length);
		expect(publishedValues.length - judged.length).toBe(Object.keys(SLOW_CLAIMS).length);
		for (const { source, locator } of publishedValues) {
			expect(source).not.toBe('');
			expect(locator).not.toBe('');
		}
	});

	it.each(judged.map((value) => [value.id, titleOf(value), value] as const))(
		'%s (%s)',
		async (_id, _title, { claim, expect: wanted, diagnosis }) => {
			const verdict = await verdictOf(claim, SECONDS, STATIONS);
			expect([verdict.status, verdict.reason]).toEqual([wanted, expect.any(String)]);
			const kinds = verdict.diagnosis.map(({ kind }) => kind);
			if (diagnosis) expect(kinds).toContain(diagnosis);
			// What agrees is never explained away.
			if (wanted === 'agreement') expect(kinds).toEqual([]);
		},
		TIMEOUT
	);
});

function titleOf({ readInTheSource, identifierFromMemory }: PublishedValue): string {
	const read = readInTheSource ? 'read in the source' : 'from memory';
	return identifierFromMemory ? `${read}, identifier from memory` : read;
}
