import { describe, expect, it } from 'vitest';
import { checkStrategy } from '../certificates/check-quantum-strategy';
import { complexZeros, realDot } from '../linalg/complex-dense';
import { seededRandom } from '../linalg/seeded-random';
import type { Control, ProblemOf } from '../problem';
import { familyFunctional } from '../scenario/families';
import { termsOfFunctional } from '../scenario/problem-terms';
import { climbChain } from './chain-climb';
import { chainFunctional, expandChain, randomChain } from './chain-strategy';
import { paddedStrategy } from './grown-strategy';
import { searchStrategies } from './strategy-search';
import { partyDimensions } from './see-saw-dimensions';
import { arrangeForSeeSaw } from './see-saw-functional';
import { StrategyGrowth } from './see-saw-growth';
import { guaranteedValue } from './see-saw-guarantee';
import { strategyValue } from './see-saw-state';
import { randomStrategy, rowOf, type SeeSawStrategy } from './see-saw-strategy';

const g = familyFunctional({ name: 'i3322' });

/** A clock that counts the polls, so that the test does the same work on any machine. */
function countingControl(): Control {
	let ticks = 0;
	return { now: () => ticks++, shouldStop: () => false, report: () => {} };
}

function expectOrthonormal(strategy: SeeSawStrategy) {
	const size = strategy.dimensions[0] ?? 0;
	expect(realDot(strategy.state, strategy.state)).toBeCloseTo(1, 13);
	for (const { basis, elements, labels } of strategy.measurements.flat()) {
		for (let k = 0; k < size; k++)
			for (let l = 0; l <= k; l++)
				expect(realDot(rowOf(basis, size, k), rowOf(basis, size, l))).toBeCloseTo(
					k === l ? 1 : 0,
					12
				);
		const trace = (elements[0]?.re ?? complexZeros(0, true).re).reduce(
			(sum, x, i) => (i % (size + 1) === 0 ? sum + x : sum),
			0
		);
		expect(trace).toBeCloseTo(labels.filter((label) => label === 0).length, 12);
	}
}

/** Polls that stand for a budget: the search does the same work on any machine. */
const never = () => undefined;

describe('chain form', () => {
	const functional = chainFunctional(g);

	it('climbs without ever falling, to what the matrices give', () => {
		if (!functional) throw new Error('two parties with two outputs');
		const arranged = arrangeForSeeSaw(g);
		for (let seed = 0; seed < 8; seed++) {
			const random = seededRandom(seed);
			const chain = randomChain(functional, 7, random.integer(64), random);
			let value = -Infinity;
			for (let step = 0; step < 5; step++) {
				const options = { best: -Infinity, tolerance: Infinity, poll: never };
				const next = climbChain(functional, chain, options);
				expect(next).toBeGreaterThanOrEqual(value - 1e-13);
				value = next;
			}
			const expanded = expandChain(functional, chain, random);
			expectOrthonormal(expanded);
			expect(strategyValue(arranged, expanded)).toBeCloseTo(value, 12);
		}
	});

	it('is for two parties with two outputs', () => {
		expect(chainFunctional(familyFunctional({ name: 'cglmp', d: 3 }))).toBeNull();
		expect(chainFunctional(familyFunctional({ name: 'mermin', n: 3 }))).toBeNull();
	});
});

describe('StrategyGrowth', () => {
	it('pads without a shake at no loss, whatever parties, outputs and measurements', () => {
		for (const [spec, dimensions, larger] of [
			[{ name: 'i3322' }, [2, 3], [4, 3]],
			[{ name: 'cglmp', d: 3 }, [2, 2], [3, 4]],
			[{ name: 'mermin', n: 3 }, [2, 2, 2], [3, 2, 4]]
		] as const) {
			const functional = familyFunctional(spec);
			const arranged = arrangeForSeeSaw(functional);
			for (const real of [true, false]) {
				for (const general of [true, false]) {
					const random = seededRandom(3);
					const { outputs } = functional.scenario;
					const old = randomStrategy(outputs, dimensions, { real, general }, random);
					const value = strategyValue(arranged, old);
					const padded = paddedStrategy(old, larger, 0, random);
					expect(strategyValue(arranged, padded)).toBeCloseTo(value, 12);
					// after a shake it is a valid strategy still: what is guaranteed is the value itself
					const shaken = paddedStrategy(old, larger, 0.3, random);
					const shakenValue = strategyValue(arranged, shaken);
					expect(guaranteedValue(functional, shaken).value).toBeCloseTo(shakenValue, 9);
				}
			}
		}
	});

	it('passes 0.25085 on I3322 in dimension 34, where random starts in small ones stay at 0.25', () => {
		// 0.250875384514 in the limit: Pal and Vertesi, Phys. Rev. A 82, 022116 (2010)
		const growth = new StrategyGrowth(g, { seed: 1, largest: 34 });
		const certificate = growth.run(25, 0.25, countingControl(), 0.25085);
		expect(certificate?.value).toBeGreaterThan(0.25085);
		expect(certificate?.value).toBeLessThan(0.250875384514);
		expect(growth.dimensions).toEqual([34, 34]);
		const problem: ProblemOf<'quantum'> = {
			format: 1,
			quantity: 'quantum',
			outputs: g.scenario.outputs,
			terms: termsOfFunctional(g),
			sense: 'max',
			constraints: [],
			seconds: 1,
			seed: 1,
			levels: null,
			dimensions: null,
			gap: 0
		};
		if (certificate)
			expect(checkStrategy(problem, g, JSON.parse(JSON.stringify(certificate))).checked).toBe(true);
	}, 60_000);

	it('grows a strategy that it is given, in other scenarios too', () => {
		// qutrits beat qubits: Acin, Durt, Gisin, Latorre, Phys. Rev. A 65, 052325 (2002), Table I
		const cglmp = familyFunctional({ name: 'cglmp', d: 3 });
		const search = { starts: 6, firstStart: 0, seed: 1, seconds: 5, state: 'free' } as const;
		const qubits = searchStrategies(
			cglmp,
			{ ...search, dimensions: [2, 2], target: null, known: null },
			countingControl()
		);
		expect(qubits?.value).toBeLessThan(2.9);
		const start = qubits?.strategy ?? null;
		const growth = new StrategyGrowth(cglmp, { seed: 1, largest: 3, start });
		const grown = growth.run(3, qubits?.value ?? 0, countingControl(), 2.91485);
		expect(grown?.value).toBeGreaterThan(2.9148);
		expect(growth.dimensions).toEqual([3, 3]);
	});
});

describe('searchStrategies', () => {
	const search = {
		dimensions: [2, 2],
		starts: 1,
		firstStart: 0,
		seed: 1,
		seconds: 3600,
		state: 'free',
		from: null,
		target: null,
		known: null
	} as const;

	it('asks for at least one start, in dimensions that are whole numbers', () => {
		expect(searchStrategies(g, search, countingControl()).startsDone).toBe(1);
		expect(() => searchStrategies(g, { ...search, starts: 0 }, countingControl())).toThrow(
			/at least one start/
		);
		expect(() => partyDimensions([0], 2)).toThrow(/0 is no whole number of at least 1/);
		expect(() => partyDimensions([2, 2, 2], 2)).toThrow(/3 numbers for 2 parties/);
	});
});
