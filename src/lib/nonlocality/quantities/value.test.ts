import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CHSH_STRATEGY, qubitMeasurement } from '../../../../tests/factories/chsh-strategy';
import { uniformBehaviour } from '../../../../tests/factories/uniform-behaviour';
import {
	randomFunctional,
	rewrittenByNoSignalling
} from '../../../../tests/factories/random-functional';
import { lehmer, quietControl } from '../../../../tests/factories/solver-problem';
import { verifyResult } from '../certificates/verify';
import { ZERO, printRational, ratio } from '../exact/rational';
import type { Problem, ProblemBox } from '../problem';
import { behaviourOfTable, valueOnBehaviour } from '../scenario/behaviour';
import { familyFunctional } from '../scenario/families';
import type { Functional } from '../scenario/functional';
import { termsOfFunctional } from '../scenario/problem-terms';
import { solve } from './solve';

const CHSH = familyFunctional({ name: 'chsh' });

function valueProblem(f: Functional, box: ProblemBox): Problem {
	return {
		format: 1,
		quantity: 'value',
		outputs: f.scenario.outputs,
		terms: termsOfFunctional(f),
		sense: 'max',
		constraints: [],
		seconds: 10,
		seed: 0,
		box
	};
}

/** P(a b|x y) = `win` when a xor b = x y, else `lose`: the isotropic box with two outputs. */
function isotropic(win: string, lose: string): Record<string, string> {
	const table: Record<string, string> = {};
	for (const x of [0, 1])
		for (const y of [0, 1])
			for (const a of [0, 1])
				for (const b of [0, 1]) table[`${a},${b}|${x},${y}`] = (a ^ b) === (x & y) ? win : lose;
	return table;
}

async function valueOf(f: Functional, probabilities: Record<string, string>) {
	const result = await solve(valueProblem(f, { kind: 'table', probabilities }), quietControl);
	if (result.status !== 'done') throw new Error(result.reason);
	expect(verifyResult(result)).toMatchObject({ checked: true, exact: result.exact });
	return result;
}

describe('the value on a table', () => {
	it('is exact for rational entries', async () => {
		// Popescu, Rohrlich, Found. Phys. 24, 379 (1994): CHSH = 4; from memory
		expect((await valueOf(CHSH, isotropic('1/2', '0'))).exact).toBe('4');
		expect((await valueOf(CHSH, isotropic('0.4', '0.1'))).exact).toBe('12/5');
		expect((await valueOf(CHSH, isotropic('1/4', '1/4'))).exact).toBe('0');
	});

	it('keeps roots symbolic and says how far the double is off', async () => {
		const result = await valueOf(CHSH, isotropic('(1+1/sqrt(2))/4', '(1-1/sqrt(2))/4'));
		expect(result.exact).toBeNull();
		// 2 sqrt 2 = 2.8284271247461900976...
		expect(result.lower).toBeLessThan(2.82842712474619);
		expect(result.upper).toBeGreaterThan(2.82842712474619);
		expect(result.tolerance).toBeLessThan(1e-14);
	});

	it.each<[string, Record<string, string>, RegExp]>([
		['sums', isotropic('1/2', '1/10'), /inputs 0,0 sum to 6\/5, not 1/],
		['negative', isotropic('3/4', '-1/4'), /= -1\/4 is negative/],
		[
			'signalling',
			{ ...isotropic('1/2', '0'), '0,0|0,0': '1', '1,1|0,0': '0' },
			/signalling: with input 1 instead of 0 of party 0/
		],
		[
			'unknown key',
			{ ...isotropic('1/2', '0'), '0,2|0,0': '0' },
			/"0,2\|0,0" names no probability/
		],
		['a digit too few', isotropic('0.427', '0.073000001'), /sum to/]
	])('names the first defect: %s', async (_, probabilities, reason) => {
		const result = await solve(valueProblem(CHSH, { kind: 'table', probabilities }), quietControl);
		expect(result).toMatchObject({ status: 'failed', reason: expect.stringMatching(reason) });
	});

	it('accepts irrational tables to 1e-9 only', () => {
		const near = isotropic('sqrt(2)/4+0.07322330471', '0.5-sqrt(2)/4-0.07322330471');
		expect(() => behaviourOfTable(CHSH.scenario, near)).not.toThrow();
		const far = isotropic('sqrt(2)/4', '0.1464');
		expect(() => behaviourOfTable(CHSH.scenario, far)).toThrow(/sum to/);
	});

	it('does not depend on how the functional is written', () => {
		fc.assert(
			fc.property(fc.nat(), (seed) => {
				const random = lehmer(seed);
				const f = randomFunctional(
					[
						[2, 2],
						[2, 2]
					],
					9,
					random
				);
				const box = behaviourOfTable(f.scenario, isotropic('3/8', '1/8'));
				const value = valueOnBehaviour(f, box).text;
				expect(valueOnBehaviour(rewrittenByNoSignalling(f, random), box).text).toBe(value);
			})
		);
	});

	it('is the plain average on the uniform behaviour', () => {
		fc.assert(
			fc.property(fc.nat(), (seed) => {
				const f = randomFunctional(
					[
						[2, 3],
						[3, 2]
					],
					9,
					lehmer(seed)
				);
				const average = f.terms.reduce((sum, { coefficient, events }) => {
					const share = events.reduce((n, [p, x]) => n * (f.scenario.outputs[p]?.[x] ?? 1), 1);
					return sum.add((coefficient.exact ?? ZERO).div(share));
				}, ratio(0n));
				expect(valueOnBehaviour(f, uniformBehaviour(f.scenario)).text).toBe(printRational(average));
			})
		);
	});
});

describe('the value of a quantum strategy', () => {
	it('is evaluated, and the check proves both sides', async () => {
		const result = await solve(
			valueProblem(CHSH, { kind: 'quantum', strategy: CHSH_STRATEGY }),
			quietControl
		);
		if (result.status !== 'done') throw new Error(result.reason);
		// Cirel'son, Lett. Math. Phys. 4, 93 (1980): 2 sqrt 2
		expect(result.value).toBeCloseTo(2 * Math.SQRT2, 12);
		expect(result.guaranteed).toEqual({ lower: false, upper: false });
		const check = verifyResult(result);
		if (!check.checked) throw new Error(check.reason);
		expect(check.lower).toBeLessThanOrEqual(2 * Math.SQRT2);
		expect(check.upper).toBeGreaterThanOrEqual(2 * Math.SQRT2);
		expect((check.upper ?? 0) - (check.lower ?? 0)).toBeLessThan(1e-11);
		expect(verifyResult({ ...result, value: 2.9 })).toMatchObject({ checked: false });
	});

	it.each([
		[
			'a state too short',
			{ ...CHSH_STRATEGY, state: CHSH_STRATEGY.state.slice(1) },
			/3 entries, not 4/
		],
		[
			'a state not normalised',
			{
				...CHSH_STRATEGY,
				state: [
					[1, 0],
					[0, 0],
					[0, 0],
					[1, 0]
				]
			},
			/squared length 2/
		],
		[
			'elements that do not sum to 1',
			{
				...CHSH_STRATEGY,
				measurements: [
					[[qubitMeasurement(0)[0], qubitMeasurement(1)[0]], qubitMeasurement(1)],
					CHSH_STRATEGY.measurements[1]
				]
			},
			/party 0, input 0: the elements do not sum/
		]
	])('refuses %s', async (_, wrong, reason) => {
		const problem = valueProblem(
			CHSH,
			JSON.parse(JSON.stringify({ kind: 'quantum', strategy: wrong }))
		);
		expect(await solve(problem, quietControl)).toMatchObject({
			status: 'failed',
			reason: expect.stringMatching(reason)
		});
	});
});
