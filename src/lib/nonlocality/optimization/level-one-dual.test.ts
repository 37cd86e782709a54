import { describe, expect, test } from 'vitest';
import { randomFunctional } from '../../../../tests/factories/random-functional';
import { npaProblem } from '../../../../tests/factories/npa-problem';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { provenFeasibleValue, provenUpperBound } from '../quantities/guaranteed-moments';
import { makeMomentProblem, type MomentProblem } from '../quantities/moment-problem';
import type { ProblemOf } from '../problem';
import { familyFunctional } from '../scenario/families';
import { makeFunctional, type Functional } from '../scenario/functional';
import { functionalToMaximise } from '../scenario/problem-functional';
import { LevelOneDual } from './level-one-dual';
import type { Iterate } from './interior-point-loop';
import { MomentCone } from './moment-cone';
import { SemidefiniteSolver } from './semidefinite-solver';

const OPTIONS = { tolerance: 1e-10, mostIterations: 60 };
/** Of the optimal values of two methods that end at OPTIONS.tolerance, relative. */
const DIFFERENCE = 3e-9;

function relaxation(problem: ProblemOf<'npa'>): MomentProblem {
	return makeMomentProblem(problem, functionalToMaximise(problem));
}

/** Ends with the solver's last point and what it proves. */
function solved(problem: MomentProblem, solverOf: (visit: (i: Iterate) => boolean) => Runs) {
	const { size } = problem.programme;
	let upper: number | null = null;
	let lower: number | null = null;
	let last = { primal: NaN, dual: NaN };
	const solver = solverOf(({ moments, multiplier, primal, dual }) => {
		const none = new Float64Array(0);
		const work = new Float64Array(size * size);
		const multipliers = { matrix: multiplier, rows: none, equalities: none };
		upper = provenUpperBound(problem, multipliers, work)?.bound ?? upper;
		lower = provenFeasibleValue(problem, moments, work, work.slice()) ?? lower;
		last = { primal, dual };
		return false;
	});
	const { ending } = solver.run(OPTIONS);
	return { ...last, upper, lower, ending };
}

interface Runs {
	run(options: typeof OPTIONS): { ending: string };
}

const byDual = (problem: MomentProblem) =>
	solved(problem, (visit) => new LevelOneDual(problem.programme, { poll: () => undefined, visit }));

const generally = (problem: MomentProblem) =>
	solved(
		problem,
		(visit) =>
			new SemidefiniteSolver(new MomentCone(problem.programme), problem.start, {
				poll: () => undefined,
				visit
			})
	);

describe('published values', () => {
	test.each([
		// Cirel'son, Lett. Math. Phys. 4, 93 (1980).
		['CHSH', familyFunctional({ name: 'chsh' }), 2 * Math.SQRT2],
		// Navascues, Pironio, Acin, Phys. Rev. Lett. 98, 010401 (2007): 3/8 at level 1.
		['I3322', familyFunctional({ name: 'i3322' }), 0.375],
		// Wehner, Phys. Rev. A 73, 022110 (2006): 2 n cos(pi / 2n), reached at level 1.
		['chained, n = 9', familyFunctional({ name: 'chained', n: 9 }), 18 * Math.cos(Math.PI / 18)]
	])('%s', (_, f, value) => {
		const { upper, lower, ending } = byDual(relaxation(npaProblem(f, 1)));
		expect(ending).toBe('converged');
		expect(upper).toBeGreaterThanOrEqual(value - 1e-14);
		expect(upper).toBeLessThan(value + DIFFERENCE);
		expect(lower).toBeLessThanOrEqual(value + 1e-14);
		expect(lower).toBeGreaterThan(value - 1e-6);
	});
});

describe('the general method finds the same', () => {
	const two = (n: number) => Array.from({ length: n }, () => 2);
	test.each([
		[[two(4), two(3)], 1],
		[[two(6), two(6)], 2],
		[[two(1), two(5)], 3],
		[[two(2), two(3), two(2)], 4],
		[[two(7)], 5]
	])('%j', (outputs, seed) => {
		const all = randomFunctional(outputs, 6, lehmer(seed));
		const pairs = all.terms.filter(({ events }) => events.length <= 2);
		const problem = relaxation(npaProblem(makeFunctional(all.scenario, pairs), 1));
		expect(LevelOneDual.suits(problem.programme)).toBe(true);
		const [ours, theirs] = [byDual(problem), generally(problem)];
		const scale = 1 + Math.abs(theirs.dual);
		expect(Math.abs(ours.dual - theirs.dual)).toBeLessThan(DIFFERENCE * scale);
		expect(Math.abs((ours.upper ?? NaN) - ours.primal)).toBeLessThan(DIFFERENCE * scale);
	});
});

describe('what it is not for', () => {
	const suits = (f: Functional, changes: Partial<ProblemOf<'npa'>> = {}, level: 1 | 2 = 1) =>
		LevelOneDual.suits(relaxation(npaProblem(f, level, changes)).programme);
	const chsh = familyFunctional({ name: 'chsh' });
	test('higher levels, more outputs, rows and constraints', () => {
		expect(suits(chsh)).toBe(true);
		expect(suits(chsh, {}, 2)).toBe(false);
		expect(suits(chsh, { nonNegative: true })).toBe(false);
		expect(suits(familyFunctional({ name: 'cglmp', d: 3 }))).toBe(false);
		const terms = [['1', [[0, 0, 0]]]] as const;
		const constraint = { terms, relation: '=', value: '1/2' } as const;
		expect(suits(chsh, { constraints: [constraint] })).toBe(false);
	});
	test('it ends at once when it is stopped', () => {
		const { programme } = relaxation(npaProblem(chsh, 1));
		const stop = () => {
			throw new RangeError('stopped');
		};
		const solver = new LevelOneDual(programme, { poll: stop, visit: () => false });
		expect(() => solver.run(OPTIONS)).toThrow('stopped');
	});
});
