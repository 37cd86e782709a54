/**
 * Solvers whose host fails, stops them or lets time pass at any moment: nothing is swallowed, and what
 * is printed is still true and proved.
 */
import { describe, expect, it } from 'vitest';
import { problemOn } from '../../../../tests/factories/solver-problem';
import { verifyResult } from '../certificates/verify';
import type { Control, Problem } from '../problem';
import { familyFunctional } from '../scenario/families';
import { solve } from './solve';

const chsh = problemOn('local', familyFunctional({ name: 'chsh' }));
const svetlichny = problemOn('local', familyFunctional({ name: 'svetlichny', n: 3 }));
const half = [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1/2' }] as const;
const seeSaw = { ...chsh, quantity: 'see-saw', dimension: [2], starts: 4, state: 'free' } as const;
const quantum = {
	...chsh,
	quantity: 'quantum',
	levels: null,
	dimensions: null,
	gap: 1e-9
} as const;

/**
 * CHSH is at most 2 locally, 2 sqrt(2) in quantum theory and 4 without signalling (Clauser et al.,
 * PRL 23, 880 (1969); Cirel'son, Lett. Math. Phys. 4, 93 (1980); Popescu and Rohrlich, Found. Phys.
 * 24, 379 (1994)), and P(0|0) <= 1/2 takes nothing off these. Svetlichny's is at most 4 in hybrid
 * models (Phys. Rev. D 35, 3066 (1987)). From memory.
 */
const CASES: readonly [string, Problem, number][] = [
	['local', chsh, 2],
	['local under constraints', { ...chsh, constraints: half }, 2],
	['no-signalling', { ...chsh, quantity: 'no-signalling' }, 4],
	['hybrid, Svetlichny', { ...svetlichny, quantity: 'hybrid', model: 'svetlichny' }, 4],
	['hybrid, no-signalling', { ...svetlichny, quantity: 'hybrid', model: 'no-signalling' }, 4],
	['facet', { ...chsh, quantity: 'facet' }, 1],
	['relaxation', { ...chsh, quantity: 'npa', level: 1, nonNegative: false }, 2 * Math.SQRT2],
	['see-saw', seeSaw, 2 * Math.SQRT2],
	['see-saw under constraints', { ...seeSaw, constraints: half }, 2 * Math.SQRT2],
	['see-saw that grows', { ...seeSaw, dimension: [1], grow: 2 }, 2 * Math.SQRT2],
	['enclosure', quantum, 2 * Math.SQRT2]
];
/** Moments at which the host interrupts: calls of the control. */
const MOMENTS = [1, 2, 3, 4, 5, 6, 8, 10, 13, 17, 22, 30, 50];

/** Counts all calls; each passes `tick` milliseconds of its own clock. */
function countingControl(tick: number, at: number, what: () => boolean): Control {
	let calls = 0;
	const call = () => ++calls === at && what();
	return {
		now: () => calls++ * tick,
		shouldStop: call,
		report: () => {
			call();
		}
	};
}

describe.each(CASES)('%s', (_, problem, truth) => {
	it.each(MOMENTS)('tells of a failing host, at call %i', async (at) => {
		let failed = false;
		const control = countingControl(0, at, () => {
			failed = true;
			throw new Error('the host is gone');
		});
		const result = await solve(problem, control);
		if (!failed) expect(result.status).toBe('done');
		else
			expect(result).toMatchObject({
				status: 'failed',
				reason: 'the solver ended unexpectedly: the host is gone'
			});
	});

	it.each(MOMENTS)(
		'ends within a budget of %i ticks with what is proved, or with none',
		async (n) => {
			const result = await solve(
				{ ...problem, seconds: n },
				countingControl(1000, 0, () => false)
			);
			if (result.status !== 'done') {
				expect(result.status).toBe('limit');
				return;
			}
			expect(verifyResult(result)).toMatchObject({ checked: true });
			if (result.lower !== null && result.guaranteed.lower)
				expect(result.lower).toBeLessThanOrEqual(truth);
			if (result.upper !== null && result.guaranteed.upper)
				expect(result.upper).toBeGreaterThanOrEqual(truth);
		}
	);
});
