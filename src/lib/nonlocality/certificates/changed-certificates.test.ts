import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { quietControl } from '../../../../tests/factories/solver-problem';
import { asJson, singleChange } from '../../../../tests/support/changed-json';
import { solve, verifyResult } from '../index';
import type { DoneResult, Problem, Result } from '../problem';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { termsOfFunctional } from '../scenario/problem-terms';

type Fields<P = Problem> = P extends Problem
	? Omit<P, 'format' | 'outputs' | 'terms' | 'sense' | 'constraints' | 'seconds' | 'seed'> &
			Partial<Pick<P, 'sense' | 'constraints' | 'seconds'>>
	: never;

function about(family: FamilySpec, fields: Fields): Problem {
	const f = familyFunctional(family);
	const subject = { format: 1, outputs: f.scenario.outputs, terms: termsOfFunctional(f) } as const;
	return { ...subject, sense: 'max', constraints: [], seconds: 20, seed: 0, ...fields };
}

const npa = { quantity: 'npa', level: 1, nonNegative: false } as const;
const seeSaw = { quantity: 'see-saw', dimension: [2], starts: 3, state: 'free' } as const;
const quantum = { quantity: 'quantum', levels: null, dimensions: null, gap: 1e-8 } as const;
const chsh = { name: 'chsh' } as const;
const tilted = { name: 'tilted-chsh', alpha: 'sqrt(2)' } as const;
const atMost = (value: string) => [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value }] as const;

/**
 * Values: CHSH by Clauser et al., PRL 23, 880 (1969) and Cirel'son, Lett. Math. Phys. 4, 93 (1980);
 * tilted CHSH, sqrt(8 + 2 alpha^2), by Acin et al., PRL 108, 100402 (2012); I3322 locally and at
 * level 1, 3/8, by Collins and Gisin, J. Phys. A 37, 1775 (2004), and Navascues et al., New J. Phys.
 * 10, 073013 (2008); CGLMP at level 1 with P >= 0, 3.1547 = 2 + 2/sqrt(3), to the digits shown. All
 * from memory. Under P(0|0) <= 1/7 the no-signalling minimum of CHSH: recomputed, unpublished.
 */
const CASES: readonly [kind: string, problem: Problem, truth: number][] = [
	['deterministic-strategy', about({ name: 'i3322' }, { quantity: 'local' }), 0],
	['deterministic-strategy', about(chsh, { quantity: 'local', sense: 'min' }), -2],
	['linear-programme', about(chsh, { quantity: 'no-signalling' }), 4],
	[
		'linear-programme',
		about(chsh, { quantity: 'no-signalling', sense: 'min', constraints: atMost('1/7') }),
		-18 / 7
	],
	['npa-dual', about(tilted, { ...npa, level: '1+AB' }), Math.sqrt(12)],
	['npa-dual', about(tilted, { ...npa, level: '1+AB', sense: 'min' }), -Math.sqrt(12)],
	['npa-exact', about(chsh, npa), 2 * Math.SQRT2],
	['npa-exact', about(chsh, { ...npa, level: '1+AB', sense: 'min' }), -2 * Math.SQRT2],
	['npa-exact', about({ name: 'i3322' }, npa), 3 / 8],
	['npa-exact', about({ name: 'cglmp', d: 3 }, { ...npa, nonNegative: true }), 3.1547005],
	['quantum-strategy', about(chsh, seeSaw), 2 * Math.SQRT2],
	['quantum-strategy', about(chsh, { ...seeSaw, sense: 'min' }), -2 * Math.SQRT2],
	['enclosure', about(chsh, quantum), 2 * Math.SQRT2],
	['enclosure', about(tilted, { ...quantum, sense: 'min' }), -Math.sqrt(12)]
];

/** The digits known of the truths above. */
const DIGITS = 1e-7;
const CHANGES = 300;

describe.each(CASES)('%s, %#', (kind, problem, truth) => {
	let result: DoneResult;
	beforeAll(async () => {
		const solved = await solve(problem, quietControl);
		if (solved.status !== 'done') throw new Error(solved.reason);
		result = solved;
	});

	it('is of this kind and proves what is printed', () => {
		expect(result.certificate?.kind).toBe(kind);
		const outcome = verifyResult(JSON.parse(JSON.stringify(result)) as Result);
		expect(outcome).toMatchObject({ checked: true });
		for (const side of [result.lower, result.upper])
			if (side !== null) expect(Math.abs(side - truth)).toBeLessThan(DIGITS);
	});

	it('with any single change is caught, or still proves what is printed', () => {
		const certificate = asJson(result.certificate);
		let caught = 0;
		fc.assert(
			fc.property(singleChange(certificate), (changed) => {
				const other = { ...result, certificate: changed } as unknown as Result;
				const outcome = verifyResult(other);
				if (!outcome.checked) {
					caught++;
					return;
				}
				const { lower, upper, exact } = outcome;
				if (result.lower !== null && result.guaranteed.lower && lower !== null)
					expect(lower).toBeGreaterThanOrEqual(result.lower);
				if (result.upper !== null && result.guaranteed.upper && upper !== null)
					expect(upper).toBeLessThanOrEqual(result.upper);
				if (lower !== null) expect(lower).toBeLessThanOrEqual(truth + DIGITS);
				if (upper !== null) expect(upper).toBeGreaterThanOrEqual(truth - DIGITS);
				if (exact !== null) expect(exact).toBe(result.exact);
			}),
			{ numRuns: CHANGES }
		);
		expect(caught).toBeGreaterThan(CHANGES / 3);
	});
});
