import { beforeAll, describe, expect, it } from 'vitest';
import { problemOn, quietControl } from '../../../../tests/factories/solver-problem';
import { asResult, expectChangesCaught } from '../../../../tests/support/certificate-changes';
import { asJson } from '../../../../tests/support/changed-json';
import { parseRational } from '../exact/rational';
import type { DoneResult, Problem } from '../problem';
import { solve } from './solve';
import { parseExpression } from '../scenario/expression';
import { familyFunctional } from '../scenario/families';
import { termsOfFunctional } from '../scenario/problem-terms';
import { verifyResult } from '../certificates/verify';

const svetlichny = problemOn('local', familyFunctional({ name: 'svetlichny', n: 3 }));
const chsh = problemOn('local', familyFunctional({ name: 'chsh' }));
const tilted = problemOn('local', familyFunctional({ name: 'tilted-chsh', alpha: '1/2' }));
const correlator = (text: string) =>
	termsOfFunctional(parseExpression(text, { outputs: chsh.outputs, indexBase: 0 }).functional);

// Sources: hybrid-maximum.test.ts, facet-test.test.ts and constrained-local-maximum.test.ts, where
// the same values are compared with published ones or found by a second method.
const CASES: readonly [string, Problem, string][] = [
	['hybrid, Svetlichny', { ...svetlichny, quantity: 'hybrid', model: 'svetlichny' }, '4'],
	['hybrid, no-signalling', { ...svetlichny, quantity: 'hybrid', model: 'no-signalling' }, '4'],
	['facet', { ...chsh, quantity: 'facet' }, '1'],
	['no facet', { ...tilted, quantity: 'facet' }, '0'],
	[
		'local with constraints',
		{
			...chsh,
			terms: correlator('-A1 B1 + A0'),
			constraints: [
				{ terms: correlator('A0 B0'), relation: '>=', value: '1/2' },
				{ terms: correlator('A0 B1'), relation: '=', value: '2/3' },
				{ terms: correlator('A1 B0'), relation: '>=', value: '3/4' },
				{ terms: correlator('A0'), relation: '<=', value: '0' }
			]
		},
		// CHSH <= 2: -A1 B1 <= 2 - 1/2 - 2/3 - 3/4
		'1/12'
	]
];

describe.each(CASES)('%s', (_, problem, truthText) => {
	const truth = parseRational(truthText);
	let result: DoneResult;
	beforeAll(async () => {
		const found = await solve(problem, quietControl);
		if (found.status !== 'done') throw new Error(found.reason);
		result = found;
	});

	it('is checked on both sides and exactly, also after a round trip through JSON', () => {
		const again = asResult(asJson(result));
		for (const stored of [result, again])
			expect(verifyResult(stored)).toMatchObject({ checked: true, exact: truthText });
	});

	it('any change to the certificate is caught or still proves the printed bound', () => {
		if (!truth) throw new Error('no truth');
		expectChangesCaught(result, truth, { numRuns: 250, seed: 8, least: 50 });
	});

	it('proves nothing on another problem, and nothing tighter', () => {
		const doubled = problem.terms.map(([c, events]) => [`2*(${c})`, events] as const);
		const moved = [
			...doubled,
			['1', [[0, 0, 0]]] as const,
			['-1', [[1, 0, 0]]] as const
		] as typeof problem.terms;
		const elsewhere = { ...result, problem: { ...problem, terms: moved } };
		expect(verifyResult(elsewhere)).toMatchObject({ checked: false });
		const quantity = problem.quantity === 'local' ? 'no-signalling' : 'local';
		const otherwise = asResult(asJson({ ...result, quantity, problem: { ...problem, quantity } }));
		expect(verifyResult(otherwise)).toMatchObject({ checked: false });
		for (const side of [
			{ lower: (result.lower ?? 0) + 1e-6 },
			{ upper: (result.upper ?? 0) - 1e-6 },
			{ exact: `${truthText}1` }
		])
			expect(verifyResult({ ...result, ...side })).toMatchObject({ checked: false });
	});
});
