import { describe, expect, it } from 'vitest';
import { solve, verifyResult } from '../nonlocality';
import { parseProblem } from './problem';
import { parseResult } from './result';

const control = { now: () => performance.now(), shouldStop: () => false, report: () => undefined };

async function printed(problem: object): Promise<Record<string, unknown>> {
	return JSON.parse(JSON.stringify(await solve(parseProblem(problem), control)));
}

/** Enough strategies that the budget ends in their midst. */
const WIDE = Array.from({ length: 16 }, (_, x) =>
	Array.from({ length: 16 }, (_unused, y) => ((3 * x + y * y) % 5) - 2)
);

const chsh = { family: { name: 'chsh' } };

describe('parseResult', () => {
	it.each([
		{ ...chsh, quantity: 'local' },
		{ ...chsh, quantity: 'local', constraints: [{ expression: 'A0', relation: '<=', value: 0 }] },
		{ family: { name: 'xor-game', matrix: WIDE }, quantity: 'local', seconds: 1e-6 },
		{ ...chsh, quantity: 'no-signalling' },
		{ family: { name: 'mermin', n: 3 }, quantity: 'hybrid', model: 'svetlichny' },
		{ family: { name: 'mermin', n: 3 }, quantity: 'hybrid', model: 'no-signalling' },
		{ ...chsh, quantity: 'facet' },
		{ family: { name: 'elegant' }, quantity: 'facet', sense: 'min' },
		{ ...chsh, quantity: 'npa', level: 1, nonNegative: true },
		{ ...chsh, quantity: 'npa', level: '1+AB', sense: 'min' },
		{ ...chsh, quantity: 'see-saw', dimension: 2 },
		{
			...chsh,
			quantity: 'see-saw',
			dimension: 2,
			starts: 2,
			constraints: [{ expression: 'A0', relation: '<=', value: 0 }]
		},
		{ family: { name: 'cglmp', d: 3 }, quantity: 'see-saw', dimension: 2, grow: 3, seconds: 2 },
		{ ...chsh, quantity: 'quantum', seconds: 5 },
		{ ...chsh, quantity: 'value', box: { family: 'uniform' } },
		{ family: { name: 'mermin', n: 3 }, quantity: 'quantum', seconds: 5 }
	])('reads what the solvers print of %j, and the check accepts it', async (problem) => {
		const json = await printed(problem);
		const result = parseResult(json);
		expect(JSON.parse(JSON.stringify(result))).toEqual(json);
		expect(verifyResult(result)).toMatchObject({ checked: true });
	});

	it('names the field that is wrong', async () => {
		const json = await printed({ ...chsh, quantity: 'npa', level: 1 });
		const certificate = { ...Object(json['certificate']) };
		const wrong: [object, string][] = [
			[
				{ ...json, certificate: { ...certificate, multiplier: [1, 'x'] } },
				'certificate.multiplier[1]'
			],
			[{ ...json, certificate: { ...certificate, extra: 1 } }, 'certificate.extra: is not known'],
			[
				{ ...json, certificate: { ...certificate, kind: 'faith' } },
				'certificate.kind: must be one'
			],
			[{ ...json, status: 'limit' }, 'status: must be done'],
			[{ ...json, upper: 'high' }, 'upper: must be a finite number'],
			[{ ...json, quantity: 'local' }, 'quantity: is not that of the problem'],
			[{ ...json, problem: { ...Object(json['problem']), level: 0 } }, 'problem.level'],
			[
				{ ...json, problem: { ...Object(json['problem']), terms: [['1/0', []]] } },
				'problem.terms[0][0]'
			],
			[{ ...chsh, quantity: 'local' }, 'this is a problem, not yet its result'],
			[[], 'must be an object']
		];
		for (const [value, message] of wrong) expect(() => parseResult(value)).toThrow(message);
	});
});
