import { describe, expect, it } from 'vitest';
import { checkEnclosure } from '../certificates/check-enclosure';
import type { EnclosureCertificate } from '../certificates/types';
import { SolverStop, type Control, type Problem, type ProblemOf, type Progress } from '../problem';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { functionalToMaximise } from '../scenario/problem-functional';
import { termsOfFunctional } from '../scenario/problem-terms';
import { quantumMaximum } from './quantum-maximum';

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};

function setUp(spec: FamilySpec, changes: Partial<ProblemOf<'quantum'>> = {}) {
	const f = familyFunctional(spec);
	const problem: ProblemOf<'quantum'> = {
		format: 1,
		quantity: 'quantum',
		outputs: f.scenario.outputs,
		terms: termsOfFunctional(f),
		sense: 'max',
		constraints: [],
		seconds: 20,
		seed: 1,
		levels: null,
		dimensions: null,
		gap: 1e-8,
		...changes
	};
	return { g: functionalToMaximise(problem satisfies Problem), problem };
}

function enclosureOf(certificate: unknown): EnclosureCertificate {
	return JSON.parse(JSON.stringify(certificate));
}

describe('quantumMaximum closes on published values', () => {
	it.each<[FamilySpec, number, number]>([
		// Cirel'son, Lett. Math. Phys. 4, 93 (1980)
		[{ name: 'chsh' }, 2 * Math.SQRT2, 1e-8],
		// Acin, Massar, Pironio, Phys. Rev. Lett. 108, 100402 (2012)
		[{ name: 'tilted-chsh', alpha: 0.5 }, Math.sqrt(8.5), 1e-8],
		[{ name: 'tilted-chsh', alpha: 1 }, Math.sqrt(10), 1e-8],
		[{ name: 'tilted-chsh', alpha: 1.5 }, Math.sqrt(12.5), 1e-8],
		// Wehner, Phys. Rev. A 73, 022110 (2006), formula from memory
		[{ name: 'chained', n: 3 }, 6 * Math.cos(Math.PI / 6), 1e-8],
		[{ name: 'chained', n: 4 }, 8 * Math.cos(Math.PI / 8), 1e-8],
		[{ name: 'chained', n: 6 }, 12 * Math.cos(Math.PI / 12), 1e-8],
		// Gisin, arXiv:quant-ph/0702021, from memory
		[{ name: 'elegant' }, 4 * Math.sqrt(3), 1e-8],
		// Acin, Durt, Gisin, Latorre, Phys. Rev. A 65, 052325 (2002), Table I (4 decimals there)
		[{ name: 'cglmp', d: 3 }, 2.914854215512676, 1e-8],
		// Mermin 1990, Peres 1990; Aravind, arXiv:quant-ph/0206070, from memory
		[{ name: 'magic-square' }, 1, 1e-8],
		// Mermin, Phys. Rev. Lett. 65, 1838 (1990), from memory
		[{ name: 'mermin', n: 3 }, 4, 1e-8],
		// Collins et al., Phys. Rev. Lett. 88, 170405 (2002)
		[{ name: 'svetlichny', n: 3 }, 4 * Math.SQRT2, 1e-8],
		// Almeida et al., Phys. Rev. Lett. 104, 230404 (2010), from memory: no quantum advantage
		[{ name: 'gyni', n: 3 }, 0.25, 1e-8]
	])('%j: %d', (spec, value, gap) => {
		const { g, problem } = setUp(spec);
		const { lower, upper, certificate, guaranteed } = quantumMaximum(problem, g, control);
		expect(lower).toBeLessThanOrEqual(value + 1e-12);
		expect(upper).toBeGreaterThanOrEqual(value - 1e-12);
		expect((upper ?? Infinity) - (lower ?? -Infinity)).toBeLessThanOrEqual(gap);
		expect(guaranteed).toEqual({ lower: true, upper: true });
		const checked = checkEnclosure(problem, g, enclosureOf(certificate));
		expect(checked).toMatchObject({ checked: true });
		if (!checked.checked) return;
		expect(checked.lower).toBeGreaterThanOrEqual(lower ?? Infinity);
		expect(checked.upper).toBeLessThanOrEqual(upper ?? -Infinity);
	});
});

describe('quantumMaximum', () => {
	it('maximises the negative for a minimum', () => {
		const { g, problem } = setUp({ name: 'tilted-chsh', alpha: 1 }, { sense: 'min' });
		// the minimum of the tilted CHSH expression is -sqrt(10) by relabelling every output
		const { lower, upper } = quantumMaximum(problem, g, control);
		expect(lower).toBeCloseTo(Math.sqrt(10), 8);
		expect(upper).toBeCloseTo(Math.sqrt(10), 8);
	});

	it('follows a scale, a constant and a relabelling of the functional', () => {
		const { problem } = setUp({ name: 'cglmp', d: 3 });
		// 3 f + 1 with the parties exchanged and every output moved on by one
		const moved = problem.terms.map(
			([c, events]) =>
				[`3*(${c})`, events.map(([p, x, a]) => [1 - p, x, (a + 1) % 3] as const)] as const
		);
		const changed: ProblemOf<'quantum'> = { ...problem, terms: [...moved, ['1', []]], gap: 1e-7 };
		const { lower, upper } = quantumMaximum(changed, functionalToMaximise(changed), control);
		// Phys. Rev. A 65, 052325 (2002), Table I
		expect(Math.abs((lower ?? 0) - (3 * 2.914854215512676 + 1))).toBeLessThan(1e-7);
		expect(Math.abs((upper ?? 0) - (3 * 2.914854215512676 + 1))).toBeLessThan(1e-7);
	});

	it('keeps the deterministic strategy where nothing quantum is better', () => {
		const { g, problem } = setUp({ name: 'gyni', n: 3 });
		const { certificate, method } = quantumMaximum(problem, g, control);
		expect(enclosureOf(certificate).lower?.kind).toBe('deterministic-strategy');
		expect(method['lowerFrom']).toBe('local');
	});

	it('begins at a strategy that it is given, and notes levels that are refused', () => {
		const spec = { name: 'cglmp', d: 3 } as const;
		const first = enclosureOf(
			quantumMaximum(setUp(spec).problem, setUp(spec).g, control).certificate
		);
		if (first.lower?.kind !== 'quantum-strategy') throw new Error('no strategy');
		// dimension 1 and a level past the limits alone would reach 2 and nothing
		const { g, problem } = setUp(spec, {
			dimensions: [1],
			levels: [1, { perParty: 6 }],
			start: first.lower.strategy
		});
		const { lower, method, certificate } = quantumMaximum(problem, g, control);
		expect(lower).toBeGreaterThan(2.914854215);
		expect(method['levels']).toMatchObject([
			{ level: 1 },
			{ reason: expect.stringMatching(/rows/) }
		]);
		expect(checkEnclosure(problem, g, enclosureOf(certificate))).toMatchObject({ checked: true });
	});

	it('uses only the levels and dimensions it is given, and ends when they are spent', () => {
		const { g, problem } = setUp(
			{ name: 'i3322' },
			{ levels: [1, '1+AB'], dimensions: [2], seconds: 60 }
		);
		const start = performance.now();
		const { lower, upper, method } = quantumMaximum(problem, g, control);
		expect(performance.now() - start).toBeLessThan(30_000);
		// Navascues, Vertesi, Phys. Rev. Lett. 115, 020501 (2015); New J. Phys. 10, 073013 (2008)
		expect(lower).toBeCloseTo(0.25, 9);
		expect(Math.abs((upper ?? 0) - 0.2514709)).toBeLessThan(1e-7);
		expect(method).toMatchObject({ stopped: 'nothing left to try', upperLevel: '1+AB' });
	});

	it('ends when both sides are within what was asked, of a minimum too', () => {
		const within = [2.82, 2.83] as const;
		const { g, problem } = setUp({ name: 'chsh' }, { within });
		const maximum = quantumMaximum(problem, g, control);
		expect(maximum.lower).toBeGreaterThanOrEqual(2.82);
		expect(maximum.upper).toBeLessThanOrEqual(2.83);
		expect(maximum.method).toMatchObject({ stopped: 'both sides within what was asked' });
		const turned = setUp({ name: 'chsh' }, { sense: 'min', within: [-2.83, -2.82], gap: 0 });
		const { method } = quantumMaximum(turned.problem, turned.g, control);
		expect(method).toMatchObject({ stopped: 'both sides within what was asked' });
	});

	it('stops at its budget with both sides, and reports on the way', () => {
		const { g, problem } = setUp({ name: 'i3322' }, { seconds: 2 });
		const seen: Progress[] = [];
		const start = performance.now();
		const { lower, upper } = quantumMaximum(problem, g, {
			...control,
			report: (p) => seen.push(p)
		});
		expect(performance.now() - start).toBeLessThan(4000);
		expect(lower).toBeGreaterThan(0.2499999);
		expect(upper).toBeLessThan(0.25094);
		expect(seen.some(({ stage }) => stage.startsWith('see-saw'))).toBe(true);
		expect(seen.some(({ stage }) => stage.startsWith('NPA'))).toBe(true);
	});

	it('ends when told to, and refuses constraints', () => {
		const { g, problem } = setUp({ name: 'i3322' });
		const begin = performance.now();
		const impatient = { ...control, shouldStop: () => performance.now() - begin > 300 };
		expect(() => quantumMaximum(problem, g, impatient)).toThrow(SolverStop);
		expect(performance.now() - begin).toBeLessThan(1500);
		const constraints = [{ terms: problem.terms, relation: '=', value: '0' }] as const;
		expect(() => quantumMaximum({ ...problem, constraints }, g, control)).toThrow(/constraints/);
	});
});
