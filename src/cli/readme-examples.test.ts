import { describe, expect, it } from 'vitest';
import { solve } from '../lib/nonlocality';
import { parseRational } from '../lib/nonlocality/exact/rational';
import readme from '../lib/nonlocality/README.md?raw';
import { parseProblem } from '../lib/schemas/problem';

const control = { now: () => performance.now(), shouldStop: () => false, report: () => undefined };

/** `- **Example.** `{ problem }`: value`, under the heading of its quantity. */
const SECTIONS = /^### `([a-z-]+)`: .*$/gm;
const EXAMPLE = /^- \*\*Example\.\*\* `(\{.*?\})`: (\d+(?:\/\d+)?(?:\.\d+)?)/m;

const sections = [...readme.matchAll(SECTIONS)].map((match) => {
	const [, problem = '', value = ''] = EXAMPLE.exec(readme.slice(match.index)) ?? [];
	return { quantity: match[1] ?? '', problem, value };
});

describe("the examples of the library's README", () => {
	it('stand under every quantity', () => {
		expect(sections.length).toBeGreaterThanOrEqual(8);
	});

	it.each(sections.map((section) => [section.quantity, section] as const))(
		'%s gives what it says',
		async (quantity, { problem, value }) => {
			const read = parseProblem(JSON.parse(problem));
			expect(read.quantity).toBe(quantity);
			const result = await solve(read, control);
			expect(result.status).toBe('done');
			if (result.status !== 'done') return;
			const wanted = Number(parseRational(value)?.valueOf());
			const digits = value.split('.')[1]?.length ?? 9;
			for (const side of [result.value, result.lower, result.upper])
				if (side !== null) expect(side).toBeCloseTo(wanted, digits - 1);
		},
		60_000
	);
});
