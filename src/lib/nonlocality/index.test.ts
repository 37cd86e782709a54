import { beforeAll, describe, expect, it } from 'vitest';
import { problemOn, solved } from '../../../tests/factories/solver-problem';
import { asResult, expectChangesCaught } from '../../../tests/support/certificate-changes';
import { asJson } from '../../../tests/support/changed-json';
import { parseRational } from './exact/rational';
import type { DoneResult } from './problem';
import { verifyResult } from './index';
import { familyFunctional, type FamilySpec } from './scenario/families';

// Values: Collins et al., PRL 88, 040404 (2002); Collins, Gisin, J. Phys. A 37, 1775 (2004); Almeida
// et al., PRL 104, 230404 (2010); all from memory. I3322 at no-signalling: recomputed, unpublished.
const CASES: readonly [FamilySpec, 'local' | 'no-signalling', string][] = [
	[{ name: 'cglmp', d: 3 }, 'local', '2'],
	[{ name: 'i3322' }, 'local', '0'],
	[{ name: 'gyni', n: 3 }, 'local', '1/4'],
	[{ name: 'i3322' }, 'no-signalling', '1'],
	[{ name: 'gyni', n: 3 }, 'no-signalling', '1/3']
];

describe.each(CASES)('%o %s', (spec, quantity, truthText) => {
	const truth = parseRational(truthText);
	let result: DoneResult;
	beforeAll(async () => {
		const f = familyFunctional(spec);
		result = await solved(
			quantity === 'local' ? problemOn('local', f) : problemOn('no-signalling', f)
		);
	});

	it('is checked, on both sides and exactly', () => {
		expect(verifyResult(result)).toMatchObject({ checked: true, exact: truthText });
	});

	it('is checked after a round trip through JSON', () => {
		expect(verifyResult(asResult(asJson(result)))).toMatchObject({ checked: true });
	});

	it('any change to the certificate is caught or still proves the printed bound', () => {
		if (!truth) throw new Error('no truth');
		expectChangesCaught(result, truth, { numRuns: 400, seed: 6, least: 100 });
	});

	it('a printed side tighter than what is proved is refused', () => {
		const lower = { ...result, lower: (result.lower ?? 0) + 1e-6 };
		const upper = { ...result, upper: (result.upper ?? 0) - 1e-6 };
		const exact = { ...result, exact: `${truthText}1` };
		const value = { ...result, value: (result.value ?? 0) + 1e-6 };
		for (const tampered of [lower, upper, exact, value])
			expect(verifyResult(tampered)).toMatchObject({ checked: false });
	});

	it('a looser printed side passes', () => {
		const looser = { ...result, lower: -1000, upper: 1000 };
		expect(verifyResult(looser)).toMatchObject({ checked: true });
	});

	it('proves nothing on another problem', () => {
		const { problem } = result;
		const doubled = problem.terms.map(([c, events]) => [`2*(${c})`, events] as const);
		const moved = [...doubled, ['1', []] as const];
		expect(verifyResult({ ...result, problem: { ...problem, terms: moved } })).toMatchObject({
			checked: false
		});
		const kind = quantity === 'local' ? 'no-signalling' : 'local';
		const otherwise = { ...result, problem: { ...problem, quantity: kind } };
		expect(verifyResult(asResult(asJson(otherwise)))).toMatchObject({ checked: false });
	});

	it('needs its certificate', () => {
		expect(verifyResult({ ...result, certificate: null })).toMatchObject({
			checked: false,
			reason: 'the result carries no certificate'
		});
	});
});

describe('the minimum', () => {
	it.each(['local', 'no-signalling'] as const)(
		'%s: sides and signs turned back',
		async (quantity) => {
			const f = familyFunctional({ name: 'i3322' });
			const problem =
				quantity === 'local'
					? problemOn('local', f, { sense: 'min' })
					: problemOn('no-signalling', f, { sense: 'min' });
			const result = await solved(problem);
			expect(verifyResult(result)).toMatchObject({
				checked: true,
				exact: result.exact,
				lower: result.lower,
				upper: result.upper
			});
			expect(result.value).toBeLessThan(0);
			expect(verifyResult({ ...result, upper: (result.upper ?? 0) - 0.5 })).toMatchObject({
				checked: false
			});
		}
	);
});

it('a large enumeration proves its lower side only, and says so', async () => {
	const matrix = Array.from({ length: 20 }, (_, x) =>
		Array.from({ length: 20 }, (_, y) => ((x * x + 3 * x * y + y) % 5) - 2)
	);
	const f = familyFunctional({ name: 'xor-game', matrix });
	const result = await solved(problemOn('local', f));
	expect(verifyResult(result)).toMatchObject({
		checked: true,
		lower: result.lower,
		upper: null,
		exact: null,
		method: expect.stringContaining('only the lower side is checked')
	});
});

it('an unfinished result is not checked', () => {
	const problem = problemOn('local', familyFunctional({ name: 'chsh' }));
	const outcome = verifyResult({
		format: 1,
		status: 'limit',
		reason: 'too large',
		quantity: 'local',
		method: {},
		seconds: 0,
		seed: 0,
		solver: 'merestone 0.1.0',
		problem
	});
	expect(outcome).toEqual({ checked: false, reason: 'the result is not done: limit' });
});

it('the README names the whole public surface, quantities and certificate kinds', async () => {
	const surface = await import('./index');
	const readme = (await import('./README.md?raw')).default;
	for (const name of Object.keys(surface)) expect(readme).toContain(`\`${name}`);
	const moments = ['npa-dual', 'npa-exact', 'quantum-strategy', 'enclosure'];
	const polytopes = ['deterministic-strategy', 'linear-programme', 'local-mixture'];
	for (const kind of [...moments, ...polytopes, 'hybrid', 'facet'])
		expect(readme).toContain(`### \`${kind}\`\n`);
	const exact = ['value', 'local', 'no-signalling', 'hybrid', 'facet'];
	for (const quantity of [...exact, 'npa', 'see-saw', 'quantum'])
		expect(readme).toContain(`### \`${quantity}\`: `);
});
