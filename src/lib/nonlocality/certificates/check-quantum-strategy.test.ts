import { describe, expect, it } from 'vitest';
import type { ComplexMatrix, ProblemOf } from '../problem';
import { familyFunctional } from '../scenario/families';
import { termsOfFunctional } from '../scenario/problem-terms';
import { checkStrategy } from './check-quantum-strategy';
import type { OutputBasis, StrategyCertificate } from './types';

const g = familyFunctional({ name: 'chsh' });
const problem: ProblemOf<'see-saw'> = {
	format: 1,
	quantity: 'see-saw',
	outputs: g.scenario.outputs,
	terms: termsOfFunctional(g),
	sense: 'max',
	constraints: [],
	seconds: 1,
	seed: 0,
	dimension: [2],
	starts: 1,
	state: 'free'
};
const TSIRELSON = 2 * Math.SQRT2;

const basisAt = (angle: number): OutputBasis => ({
	vectors: [
		[
			[Math.cos(angle), 0],
			[Math.sin(angle), 0]
		],
		[
			[-Math.sin(angle), 0],
			[Math.cos(angle), 0]
		]
	],
	outputs: [0, 1]
});

function projectors({ vectors }: OutputBasis): ComplexMatrix[] {
	return vectors.map((v) => v.map((a) => v.map((b) => [a[0] * b[0], 0] as const)));
}

/** The optimal strategy of CHSH, written down by hand: real qubits, angles 0, 45, +-22.5 degrees. */
function optimal(value = TSIRELSON - 1e-12): StrategyCertificate {
	const angles = [
		[0, Math.PI / 4],
		[Math.PI / 8, -Math.PI / 8]
	];
	const bases = angles.map((row) => row.map(basisAt));
	return {
		kind: 'quantum-strategy',
		strategy: {
			dimensions: [2, 2],
			state: [
				[Math.SQRT1_2, 0],
				[0, 0],
				[0, 0],
				[Math.SQRT1_2, 0]
			],
			measurements: bases.map((row) => row.map(projectors))
		},
		projective: true,
		bases,
		value
	};
}

/** Every number of a certificate with a way to set it. */
function numbersIn(
	node: unknown,
	visit: (set: (to: unknown) => void, value: number) => void
): void {
	if (typeof node !== 'object' || node === null) return;
	for (const [key, child] of Object.entries(node)) {
		if (typeof child === 'number') visit((to) => Reflect.set(node, key, to), child);
		else numbersIn(child, visit);
	}
}

describe('checkStrategy', () => {
	it('proves the quantum maximum of CHSH from a strategy written by hand, through JSON', () => {
		// Cirel'son, Lett. Math. Phys. 4, 93 (1980)
		const outcome = checkStrategy(problem, g, JSON.parse(JSON.stringify(optimal())));
		expect(outcome).toMatchObject({ checked: true, upper: null });
		if (!outcome.checked) return;
		expect(outcome.lower).toBeGreaterThan(TSIRELSON - 1e-12);
		expect(outcome.lower).toBeLessThanOrEqual(TSIRELSON);
	});

	it('proves it from the elements alone, as general measurements', () => {
		const general = { ...optimal(TSIRELSON - 1e-11), projective: false, bases: null };
		const outcome = checkStrategy(problem, g, general);
		expect(outcome).toMatchObject({ checked: true });
		if (outcome.checked) expect(outcome.lower).toBeLessThanOrEqual(TSIRELSON);
	});

	it('refuses a value above what the strategy reaches', () => {
		expect(checkStrategy(problem, g, optimal(TSIRELSON))).toMatchObject({ checked: false });
		expect(checkStrategy(problem, g, optimal(NaN))).toMatchObject({ checked: false });
	});

	it('never proves more than the quantum maximum, whatever number is changed', () => {
		let mutations = 0;
		for (const projective of [true, false]) {
			for (const change of [1e-13, 1e-6, 0.1, -0.3, 1e200, NaN, Infinity, null, '1']) {
				const bases = projective ? optimal().bases : null;
				const count = countNumbers({ ...optimal(), bases });
				for (let at = 0; at < count; at++) {
					const mutant = JSON.parse(JSON.stringify({ ...optimal(), projective, bases }));
					let index = 0;
					numbersIn(mutant, (set, value) => {
						if (index++ === at) set(typeof change === 'number' ? value + change : change);
					});
					const outcome = checkStrategy(problem, g, mutant);
					mutations++;
					if (!outcome.checked) continue;
					expect(outcome.lower).toBeLessThanOrEqual(TSIRELSON);
					expect(outcome.lower).toBeGreaterThanOrEqual(mutant.value);
				}
			}
		}
		expect(mutations).toBeGreaterThan(1000);
	});

	it('refuses missing parts, with the place', () => {
		const { strategy } = optimal();
		const without = (changes: object) => JSON.parse(JSON.stringify({ ...optimal(), ...changes }));
		expect(checkStrategy(problem, g, without({ bases: null }))).toMatchObject({
			reason: 'bases is not a list of 2'
		});
		expect(checkStrategy(problem, g, without({ strategy: null }))).toMatchObject({
			checked: false
		});
		const short = { ...strategy, state: strategy.state.slice(1) };
		expect(checkStrategy(problem, g, without({ strategy: short }))).toMatchObject({
			reason: 'the state is not a list of 4'
		});
	});

	it('refuses elements that are no measurement', () => {
		const tooMuch = optimal(-100);
		const doubled = tooMuch.strategy.measurements.map((row) =>
			row.map(() =>
				projectors(basisAt(0)).map((m) => m.map((r) => r.map(([re]) => [2 * re, 0] as const)))
			)
		);
		const strategy = { ...tooMuch.strategy, measurements: doubled };
		const outcome = checkStrategy(problem, g, {
			...tooMuch,
			projective: false,
			bases: null,
			strategy
		});
		expect(outcome).toMatchObject({
			checked: false,
			reason: expect.stringContaining('no measurement')
		});
	});

	it("holds the strategy to the problem's dimension and state", () => {
		expect(checkStrategy({ ...problem, dimension: [1] }, g, optimal())).toMatchObject({
			reason: 'the strategy has dimensions 2 x 2, the problem allows 1 x 1'
		});
		const entangled = { ...problem, state: 'maximally-entangled' } as const;
		expect(checkStrategy(entangled, g, optimal()).checked).toBe(true);
		expect(checkStrategy({ ...entangled, dimension: [3] }, g, optimal())).toMatchObject({
			reason: 'the strategy does not have the dimensions of the prescribed state'
		});
		const short = { ...problem, state: [[1, 0]] } as const;
		expect(checkStrategy(short, g, optimal())).toMatchObject({
			reason: 'the prescribed state does not fit the dimensions'
		});
		const product = {
			...problem,
			state: [
				[1, 0],
				[0, 0],
				[0, 0],
				[0, 0]
			]
		} as const;
		expect(checkStrategy(product, g, optimal())).toMatchObject({
			reason: 'the state is not the prescribed one'
		});
	});
});

function countNumbers(node: unknown): number {
	let count = 0;
	numbersIn(node, () => count++);
	return count;
}
