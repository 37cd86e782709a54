import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkStrategy } from '../certificates/check-quantum-strategy';
import type { StrategyCertificate } from '../certificates/types';
import { seededRandom } from '../linalg/seeded-random';
import { SolverStop, type Control, type ProblemOf, type ProblemTerm } from '../problem';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { functionalOfTerms, termsOfFunctional } from '../scenario/problem-terms';
import { behaviourOfStrategy } from '../scenario/strategy-behaviour';
import { seeSaw } from './see-saw';
import { climb } from './see-saw-climb';
import { arrangeForSeeSaw } from './see-saw-functional';
import { guaranteedValue, tidyStrategy } from './see-saw-guarantee';
import { improveMeasurements } from './see-saw-measurement';
import { strategyValue } from './see-saw-state';
import { randomStrategy } from './see-saw-strategy';

type SeeSawProblem = ProblemOf<'see-saw'>;

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};

function setUp(spec: FamilySpec, changes: Partial<SeeSawProblem>) {
	const g = familyFunctional(spec);
	const problem: SeeSawProblem = {
		format: 1,
		quantity: 'see-saw',
		outputs: g.scenario.outputs,
		terms: termsOfFunctional(g),
		sense: 'max',
		constraints: [],
		seconds: 30,
		seed: 1,
		dimension: [2],
		starts: 10,
		state: 'free',
		...changes
	};
	return { g, problem };
}

function strategyOf(certificate: unknown): StrategyCertificate {
	return JSON.parse(JSON.stringify(certificate));
}

describe('seeSaw reaches published quantum values', () => {
	it.each<[FamilySpec, number, number, number]>([
		// Cirel'son, Lett. Math. Phys. 4, 93 (1980)
		[{ name: 'chsh' }, 2, 2 * Math.SQRT2, 1e-10],
		// Acin, Massar, Pironio, Phys. Rev. Lett. 108, 100402 (2012): sqrt(8 + 2 alpha^2)
		[{ name: 'tilted-chsh', alpha: 0.5 }, 2, Math.sqrt(8.5), 1e-9],
		[{ name: 'tilted-chsh', alpha: 1 }, 2, Math.sqrt(10), 1e-9],
		[{ name: 'tilted-chsh', alpha: 1.5 }, 2, Math.sqrt(12.5), 1e-9],
		// Wehner, Phys. Rev. A 73, 022110 (2006), formula from memory: 2n cos(pi/2n)
		[{ name: 'chained', n: 3 }, 2, 6 * Math.cos(Math.PI / 6), 1e-9],
		[{ name: 'chained', n: 4 }, 2, 8 * Math.cos(Math.PI / 8), 1e-9],
		[{ name: 'chained', n: 6 }, 2, 12 * Math.cos(Math.PI / 12), 1e-9],
		// Gisin, arXiv:quant-ph/0702021, from memory; no real qubit strategy reaches it
		[{ name: 'elegant' }, 2, 4 * Math.sqrt(3), 1e-9],
		// Navascues, Vertesi, Phys. Rev. Lett. 115, 020501 (2015)
		[{ name: 'i3322' }, 2, 0.25, 1e-10],
		// Acin, Durt, Gisin, Latorre, Phys. Rev. A 65, 052325 (2002), Table I (4 decimals there; the
		// further ones are those of the NPA 1+AB bound, which they meet)
		[{ name: 'cglmp', d: 3 }, 3, 2.914854215512676, 1e-9],
		[{ name: 'cglmp', d: 4 }, 4, 2.9726983, 1e-7],
		[{ name: 'cglmp', d: 5 }, 5, 3.0157105, 1e-7],
		// Mermin 1990, Peres 1990; as a game in Aravind, arXiv:quant-ph/0206070, from memory
		[{ name: 'magic-square' }, 4, 1, 1e-9],
		// Mermin, Phys. Rev. Lett. 65, 1838 (1990), from memory: 2^(n-1)
		[{ name: 'mermin', n: 3 }, 2, 4, 1e-9],
		[{ name: 'mermin', n: 4 }, 2, 8, 1e-9],
		// Collins et al., Phys. Rev. Lett. 88, 170405 (2002): 2^(n-1) sqrt 2
		[{ name: 'svetlichny', n: 3 }, 2, 4 * Math.SQRT2, 1e-9]
	])('%j in local dimension %i: %d', (spec, dimension, value, tolerance) => {
		const { g, problem } = setUp(spec, { dimension: [dimension], starts: 20 });
		const found = seeSaw(problem, g, control, value);
		expect(found.lower).toBeLessThanOrEqual(value + tolerance);
		expect(found.lower).toBeGreaterThanOrEqual(value - tolerance);
		expect(found.guaranteed).toEqual({ lower: true, upper: false });
		const checked = checkStrategy(problem, g, strategyOf(found.certificate));
		expect(checked).toMatchObject({ checked: true });
		if (checked.checked) expect(checked.lower).toBeGreaterThanOrEqual(found.lower ?? Infinity);
	});

	// Phys. Rev. A 65, 052325 (2002), Table I, printed to 4 decimals
	it.each([
		[3, 2.8729],
		[4, 2.8962],
		[5, 2.9105]
	])('CGLMP d=%i on the maximally entangled state: %d', (d, value) => {
		const changes = { dimension: [d], state: 'maximally-entangled' } as const;
		const { g, problem } = setUp({ name: 'cglmp', d }, changes);
		const found = seeSaw(problem, g, control);
		expect(Math.abs((found.lower ?? 0) - value)).toBeLessThan(6e-5);
		expect(checkStrategy(problem, g, strategyOf(found.certificate)).checked).toBe(true);
	});
});

describe('seeSaw with general measurements', () => {
	/**
	 * The elegant functional less sum_i P(i, 0 | 3, i) with one input of four outputs more for party
	 * 0: 4 sqrt 3 needs every E_i orthogonal to one of four directions of a tetrahedron, which no
	 * projective measurement of a qubit is. Acin, Pironio, Vertesi, Wittek, Phys. Rev. A 93, 040102
	 * (2016), from memory.
	 */
	function tetrahedron() {
		const elegant = familyFunctional({ name: 'elegant' });
		const [own = [], other = []] = elegant.scenario.outputs;
		const penalty = [0, 1, 2, 3].map((i): ProblemTerm => {
			return ['-1', [[0, 3, i], [1, i, 0]]]; // prettier-ignore
		});
		const outputs = [[...own, 4], other];
		const terms = [...termsOfFunctional(elegant), ...penalty];
		return { g: functionalOfTerms(outputs, terms), outputs, terms };
	}

	it('beats every projective qubit strategy where four outputs need a tetrahedron', () => {
		const { g, outputs, terms } = tetrahedron();
		const { problem } = setUp({ name: 'elegant' }, { outputs, terms, starts: 24 });
		const found = seeSaw(problem, g, control);
		expect(found.lower).toBeCloseTo(4 * Math.sqrt(3), 7);
		expect(found.lower).toBeLessThanOrEqual(4 * Math.sqrt(3));
		expect(found.method).toMatchObject({ projective: false });
		const certificate = strategyOf(found.certificate);
		expect(certificate).toMatchObject({ projective: false, bases: null });
		const checked = checkStrategy(problem, g, certificate);
		expect(checked).toMatchObject({ checked: true });
		if (checked.checked) expect(checked.lower).toBeGreaterThanOrEqual(found.lower ?? Infinity);
		// the best of as many projective starts: real and complex ones, two in every four
		const arranged = arrangeForSeeSaw(g);
		for (let start = 0; start < 12; start++) {
			const random = seededRandom(1, start);
			const kind = { real: start % 2 === 0, general: false };
			const strategy = randomStrategy(outputs, [2, 2], kind, random);
			const options = { moveState: true, random, best: -Infinity, poll: () => undefined };
			expect(climb(arranged, strategy, options).value).toBeLessThan(4 * Math.sqrt(3) - 1e-3);
		}
	});

	it('proves no more than the maximum, whatever number of the general strategy is changed', () => {
		const { g, outputs, terms } = tetrahedron();
		const { problem } = setUp({ name: 'elegant' }, { outputs, terms, starts: 4 });
		const { certificate } = seeSaw(problem, g, control);
		const text = JSON.stringify(certificate);
		const numbers = [...text.matchAll(/-?\d+\.\d+(e-?\d+)?/g)];
		let refused = 0;
		for (const [at, { 0: digits, index }] of numbers.entries()) {
			const changed = String(Number(digits) + (at % 2 ? 1e-3 : -1e-9));
			const mutant = text.slice(0, index) + changed + text.slice(index + digits.length);
			const checked = checkStrategy(problem, g, JSON.parse(mutant));
			if (checked.checked) expect(checked.lower).toBeLessThanOrEqual(4 * Math.sqrt(3));
			else refused++;
		}
		expect(numbers.length).toBeGreaterThan(50);
		expect(refused).toBeGreaterThan(numbers.length / 4);
	});

	it('never falls and stays a measurement, step by step', () => {
		const kinds = fc.record({ real: fc.boolean(), general: fc.boolean() });
		const dimensions = fc.tuple(fc.integer({ min: 1, max: 3 }), fc.integer({ min: 1, max: 3 }));
		const coefficients = fc.array(fc.integer({ min: -5, max: 5 }), {
			minLength: 37,
			maxLength: 37
		});
		fc.assert(
			fc.property(kinds, dimensions, coefficients, fc.nat(1000), (kind, sizes, weights, seed) => {
				const outputs = [[3, 4], [3, 2]]; // prettier-ignore
				const random = seededRandom(seed);
				const terms = weights.map((weight): ProblemTerm => {
					const [x, y] = [random.integer(2), random.integer(2)];
					const event = (party: number, input: number): [number, number, number] => [
						party,
						input,
						random.integer(outputs[party]?.[input] ?? 2)
					];
					return [String(weight), [event(0, x), event(1, y)]];
				});
				const arranged = arrangeForSeeSaw(functionalOfTerms(outputs, terms));
				const strategy = randomStrategy(outputs, sizes, kind, random);
				let value = strategyValue(arranged, strategy);
				for (let step = 0; step < 12; step++) {
					improveMeasurements(arranged, strategy, step % 2, () => undefined);
					const next = strategyValue(arranged, strategy);
					expect(next).toBeGreaterThanOrEqual(value - 1e-11);
					value = next;
				}
				// the frames are still exact: tidying them moves nothing
				tidyStrategy(strategy);
				expect(strategyValue(arranged, strategy)).toBeCloseTo(value, 9);
			}),
			{ numRuns: 40 }
		);
	});
});

describe('the stored strategy alone', () => {
	it.each<[FamilySpec, number]>([
		[{ name: 'elegant' }, 2],
		[{ name: 'cglmp', d: 3 }, 2],
		[{ name: 'cglmp', d: 3 }, 3],
		[{ name: 'svetlichny', n: 3 }, 2]
	])('re-evaluates to the reported value: %j in dimension %i', (spec, dimension) => {
		const { g, problem } = setUp(spec, { dimension: [dimension], starts: 8 });
		const found = seeSaw(problem, g, control);
		// by the evaluation of boxes, which knows nothing of see-saw
		const { strategy } = strategyOf(found.certificate);
		const box = behaviourOfStrategy(g.scenario, strategy);
		const value = g.terms.reduce(
			(sum, { coefficient, events }) => sum + coefficient.value * box.probability(events).value,
			0
		);
		expect(value).toBeGreaterThanOrEqual(found.lower ?? Infinity);
		expect(value - (found.lower ?? 0)).toBeLessThan(1e-9);
	});
});

describe('seeSaw on a prescribed state', () => {
	it('gives the Horodecki value of CHSH on a partially entangled state', () => {
		// Gisin, Phys. Lett. A 154, 201 (1991), from memory: 2 sqrt(1 + sin^2 2t) on cos t, sin t
		const angle = 0.4;
		const state = [
			[Math.cos(angle), 0],
			[0, 0],
			[0, 0],
			[0, Math.sin(angle)]
		] as const;
		const { g, problem } = setUp({ name: 'chsh' }, { state });
		const found = seeSaw(problem, g, control);
		expect(found.lower).toBeCloseTo(2 * Math.sqrt(1 + Math.sin(2 * angle) ** 2), 8);
		expect(checkStrategy(problem, g, strategyOf(found.certificate)).checked).toBe(true);
	});

	it('finds the deterministic maximum on a product state', () => {
		const state = [
			[1, 0],
			[0, 0],
			[0, 0],
			[0, 0]
		] as const;
		const { g, problem } = setUp({ name: 'chsh' }, { state });
		expect(seeSaw(problem, g, control).lower).toBeCloseTo(2, 9);
	});

	it('refuses a state that does not fit', () => {
		const { g, problem } = setUp({ name: 'chsh' }, { state: [[1, 0]] });
		expect(() => seeSaw(problem, g, control)).toThrow(/1 entries .* need 4/);
		const three = setUp({ name: 'mermin', n: 3 }, { state: 'maximally-entangled' });
		expect(() => seeSaw(three.problem, three.g, control)).toThrow(/two parties/);
	});
});

describe('seeSaw as a search', () => {
	it('gives the local maximum in dimension 1', () => {
		const { g, problem } = setUp({ name: 'chsh' }, { dimension: [1], starts: 20 });
		expect(seeSaw(problem, g, control).lower).toBeCloseTo(2, 10);
	});

	it('takes one party and six, and a constant', () => {
		const outputs = [[3, 2]];
		const alone = setUp({ name: 'chsh' }, { outputs, terms: [['2', [[0, 0, 1]]], ['-1', [[0, 1, 0]]]] }); // prettier-ignore
		const g = functionalOfTerms(outputs, alone.problem.terms);
		expect(seeSaw(alone.problem, g, control).lower).toBeCloseTo(2, 10);
		// Mermin, Phys. Rev. Lett. 65, 1838 (1990), from memory: 2^(n-1)
		const six = setUp({ name: 'mermin', n: 6 }, { starts: 4 });
		expect(seeSaw(six.problem, six.g, control, 32).lower).toBeCloseTo(32, 8);
		const constant = functionalOfTerms(outputs, [['5', []]]);
		expect(seeSaw({ ...alone.problem, terms: [['5', []]] }, constant, control).lower).toBeCloseTo(
			5,
			12
		);
		const grown = { ...alone.problem, terms: [['5', []]], grow: 3 } as const;
		expect(seeSaw(grown, constant, control).lower).toBeCloseTo(5, 12);
	});

	it('takes a dimension per party', () => {
		const { g, problem } = setUp({ name: 'chsh' }, { dimension: [2, 3] });
		const found = seeSaw(problem, g, control);
		expect(found.lower).toBeCloseTo(2 * Math.SQRT2, 9);
		expect(found.method).toMatchObject({ dimension: [2, 3] });
	});

	it('repeats itself for a seed', () => {
		const { g, problem } = setUp({ name: 'cglmp', d: 3 }, { dimension: [3], starts: 3 });
		expect(seeSaw(problem, g, control).certificate).toEqual(
			seeSaw(problem, g, control).certificate
		);
	});

	it('stops when its target is met', () => {
		const { g, problem } = setUp({ name: 'chsh' }, { starts: 1000 });
		const found = seeSaw(problem, g, control, 2 * Math.SQRT2);
		expect(Number(found.method['starts'])).toBeLessThan(20);
	});

	it('keeps the best found when its time is over', () => {
		const { g, problem } = setUp(
			{ name: 'magic-square' },
			{ dimension: [8], starts: 1e6, seconds: 0.3 }
		);
		const start = performance.now();
		const found = seeSaw(problem, g, control);
		expect(performance.now() - start).toBeLessThan(2000);
		expect(found.lower).toBeGreaterThan(0.5);
		expect(checkStrategy(problem, g, strategyOf(found.certificate)).checked).toBe(true);
	});

	it('obeys being told to stop, and limits', () => {
		const { g, problem } = setUp({ name: 'chsh' }, {});
		expect(() => seeSaw(problem, g, { ...control, shouldStop: () => true })).toThrow(SolverStop);
		expect(() => seeSaw({ ...problem, dimension: [65] }, g, control)).toThrow(/limit is 4096/);
		expect(() => seeSaw({ ...problem, grow: 65 }, g, control)).toThrow(/limit is 4096/);
		expect(() => seeSaw({ ...problem, dimension: [2, 2, 2] }, g, control)).toThrow(/3 numbers/);
	});
});

describe('seeSaw that grows or starts from a strategy', () => {
	const dimension = [2, 2];

	it('grows past what its own dimension reaches', () => {
		// below 0.250875384514: Pal and Vertesi, Phys. Rev. A 82, 022116 (2010)
		const changes = { dimension, starts: 4, grow: 34, seconds: 6 };
		const { g, problem } = setUp({ name: 'i3322' }, changes);
		const found = seeSaw(problem, g, control, 0.2508);
		expect(found.lower).toBeGreaterThan(0.2508 - 1e-9);
		expect(found.lower).toBeLessThan(0.250875384514);
		expect(found.method).toMatchObject({ grown: { dimensions: [34, 34] } });
		const certificate = strategyOf(found.certificate);
		const checked = checkStrategy(problem, g, certificate);
		expect(checked).toMatchObject({ checked: true });
		if (checked.checked) expect(checked.lower).toBeGreaterThanOrEqual(found.lower ?? Infinity);
		// without "grow" it is no strategy of the problem
		const qubits = setUp({ name: 'i3322' }, { dimension }).problem;
		expect(checkStrategy(qubits, g, certificate)).toMatchObject({ checked: false });

		const again = setUp({ name: 'i3322' }, { ...changes, start: certificate.strategy, seconds: 1 });
		const resumed = seeSaw(again.problem, g, control, found.lower);
		expect(resumed.lower).toBeGreaterThanOrEqual((found.lower ?? 0) - 1e-11);
	});

	it('begins at a stored strategy, padded to the dimension where it is smaller', () => {
		const { g, problem } = setUp({ name: 'cglmp', d: 3 }, { dimension: [3], starts: 10 });
		const best = seeSaw(problem, g, control);
		const start = strategyOf(best.certificate).strategy;
		for (const size of [3, 4]) {
			const from = { ...problem, dimension: [size, size], starts: 1, start };
			const found = seeSaw(from, g, control);
			expect(found.lower).toBeGreaterThanOrEqual((best.lower ?? 0) - 1e-11);
			expect(checkStrategy(from, g, strategyOf(found.certificate)).checked).toBe(true);
		}
		const small = { ...problem, dimension, start };
		expect(() => seeSaw(small, g, control)).toThrow(/dimensions 3 x 3 exceed the problem's 2 x 2/);
		const given = { ...problem, start, state: 'maximally-entangled' } as const;
		expect(() => seeSaw(given, g, control)).toThrow(/start: has no part with a given state/);
		const broken = { ...problem, start: { ...start, state: start.state.slice(1) } };
		expect(() => seeSaw(broken, g, control)).toThrow(/start: the state has 8 entries, not 9/);
	});

	it('begins at general measurements', () => {
		const spec = { name: 'cglmp', d: 3 } as const;
		const { g, problem } = setUp(spec, { dimension, starts: 1 });
		const random = seededRandom(7);
		const kind = { real: false, general: true };
		const certificate = guaranteedValue(
			g,
			randomStrategy(g.scenario.outputs, dimension, kind, random)
		);
		const found = seeSaw({ ...problem, start: certificate.strategy }, g, control);
		expect(found.lower).toBeGreaterThanOrEqual(certificate.value - 1e-9);
		expect(found.method).toMatchObject({ projective: false, bestStart: 0 });
		expect(checkStrategy(problem, g, strategyOf(found.certificate)).checked).toBe(true);
	});
});
