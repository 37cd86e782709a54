import { describe, expect, it } from 'vitest';
import type { StrategyCertificate } from '../certificates/types';
import { verifyResult } from '../certificates/verify';
import type { Control, DoneResult, ProblemConstraint, ProblemOf, ProblemTerm } from '../problem';
import { familyFunctional } from '../scenario/families';
import { termsOfFunctional } from '../scenario/problem-terms';
import { solve } from './solve';

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};

const joint = (x: number, a: number, y: number, b: number): ProblemTerm => [
	'1',
	[
		[0, x, a],
		[1, y, b]
	]
];
const vanishes = (term: ProblemTerm): ProblemConstraint => ({
	terms: [term],
	relation: '=',
	value: '0'
});
const CHSH = termsOfFunctional(familyFunctional({ name: 'chsh' }));
const P_A: ProblemTerm = ['1', [[0, 0, 0]]];

async function solved(
	terms: readonly ProblemTerm[],
	constraints: readonly ProblemConstraint[],
	changes: Partial<ProblemOf<'see-saw'>> = {}
) {
	const problem: ProblemOf<'see-saw'> = {
		format: 1,
		quantity: 'see-saw',
		outputs: [
			[2, 2],
			[2, 2]
		],
		terms,
		sense: 'max',
		constraints,
		seconds: 30,
		seed: 1,
		dimension: [2],
		starts: 4,
		state: 'free',
		...changes
	};
	return solve(problem, control);
}

async function done(...given: Parameters<typeof solved>): Promise<DoneResult> {
	const result = await solved(...given);
	if (result.status !== 'done') throw new Error(result.reason);
	return JSON.parse(JSON.stringify(result));
}

function violationOf(result: DoneResult): number {
	if (result.certificate?.kind !== 'quantum-strategy') throw new Error('no strategy');
	return result.certificate.violation ?? NaN;
}

/** The result with its certificate changed. */
function changed(
	result: DoneResult,
	changes: Partial<Record<keyof StrategyCertificate, unknown>>
): DoneResult {
	return JSON.parse(
		JSON.stringify({ ...result, certificate: { ...result.certificate, ...changes } })
	);
}

describe('see-saw under constraints', () => {
	const hardy = [joint(0, 0, 1, 1), joint(1, 1, 0, 0), joint(1, 0, 1, 0)].map(vanishes);

	it("reaches Hardy's maximum (5 sqrt 5 - 11)/2 with qubits, within rounding of the constraints", async () => {
		// Hardy, Phys. Rev. Lett. 71, 1665 (1993); in any dimension: Rabelo, Law, Scarani,
		// arXiv:1205.3280; both from memory
		const result = await done([joint(0, 0, 0, 0)], hardy);
		expect(Math.abs((result.lower ?? 0) - (5 * Math.sqrt(5) - 11) / 2)).toBeLessThan(1e-9);
		// equations hold to rounding only: nothing is guaranteed, and the check proves no side
		expect(result.guaranteed).toEqual({ lower: false, upper: false });
		expect(violationOf(result)).toBeGreaterThan(0);
		expect(violationOf(result)).toBeLessThan(1e-12);
		expect(verifyResult(result)).toMatchObject({ checked: true, lower: null, upper: null });
	});

	it('gives the guessing probability at a CHSH value, as an equation and as an inequality', async () => {
		// Pironio et al., Nature 464, 1021 (2010), closed form from memory: 1/2 + sqrt(2 - S^2/4)/2
		for (const [value, guess] of [
			['2.2', 0.9444097208657793],
			['2.5', 0.8307189138830738]
		] as const) {
			const equation = await done([P_A], [{ terms: CHSH, relation: '=', value }]);
			expect(equation.lower).toBeCloseTo(guess, 10);
			expect(equation.guaranteed.lower).toBe(false);
			expect(verifyResult(equation)).toMatchObject({ checked: true, lower: null });
			const inequality = await done([P_A], [{ terms: CHSH, relation: '>=', value }]);
			expect(inequality.lower).toBeCloseTo(guess, 7);
			expect(inequality.lower).toBeLessThan(guess);
			expect(inequality.guaranteed.lower).toBe(true);
			expect(violationOf(inequality)).toBe(0);
			const check = verifyResult(inequality);
			expect(check).toMatchObject({ checked: true });
			if (check.checked) expect(check.lower).toBeGreaterThanOrEqual(inequality.lower ?? Infinity);
		}
	});

	it('minimises, keeps a prescribed state, and takes general measurements along', async () => {
		const result = await done([P_A], [{ terms: CHSH, relation: '>=', value: '2.5' }], {
			sense: 'min'
		});
		expect(result.upper).toBeCloseTo(1 - 0.8307189138830738, 7);
		expect(verifyResult(result)).toMatchObject({ checked: true });
		// on the maximally entangled state every marginal is 1/2
		const entangled = await done([P_A], [{ terms: CHSH, relation: '>=', value: '2.5' }], {
			state: 'maximally-entangled'
		});
		expect(entangled.lower).toBeCloseTo(0.5, 9);
		const outputs = [
			[3, 2],
			[2, 2]
		];
		const bounded = { terms: [P_A], relation: '<=', value: '1/5' } as const;
		const three = await done([['1', [[0, 0, 0]]], joint(0, 1, 0, 0)], [bounded], { outputs });
		expect(three.lower).toBeCloseTo(1, 8);
		expect(three.guaranteed.lower).toBe(true);
		expect(verifyResult(three)).toMatchObject({ checked: true });
	});

	it('says when nothing meets the constraints', async () => {
		const result = await solved([P_A], [{ terms: CHSH, relation: '>=', value: '3' }], {
			starts: 2
		});
		expect(result).toMatchObject({ status: 'failed' });
		if (result.status !== 'done') expect(result.reason).toMatch(/met the constraints within 1e-9/);
	});

	it('catches a value, a violation or a strategy that was changed', async () => {
		const result = await done([joint(0, 0, 0, 0)], hardy);
		const { certificate } = result;
		if (certificate?.kind !== 'quantum-strategy') throw new Error('no strategy');
		expect(verifyResult({ ...result, lower: 0.0902 })).toMatchObject({ checked: false });
		expect(verifyResult(changed(result, { value: 0.0902 }))).toMatchObject({ checked: false });
		expect(verifyResult(changed(result, { violation: 0 }))).toMatchObject({ checked: false });
		expect(verifyResult({ ...result, guaranteed: { lower: true, upper: false } })).toMatchObject({
			checked: false
		});
		const silent = JSON.parse(JSON.stringify(changed(result, { violation: undefined })));
		expect(verifyResult(silent)).toMatchObject({ checked: false });
		const state = certificate.strategy.state.map(
			([re, im], i) => [re + (i ? 0 : 1e-4), im] as const
		);
		const strategy = { ...certificate.strategy, state };
		expect(verifyResult(changed(result, { strategy, value: 0.09, violation: 1 }))).toMatchObject({
			reason: expect.stringMatching(/^constraint \d is violated/)
		});
	});
});
