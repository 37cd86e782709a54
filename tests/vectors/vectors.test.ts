/**
 * Published and recomputed values (vectors.json names the source of each, and says which come from
 * memory) against the product's own solvers, through the same reading of problems and the same
 * check of certificates as everywhere else.
 */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { solve, verifyResult, type Control, type DoneResult } from '../../src/lib/nonlocality';
import { parseRational } from '../../src/lib/nonlocality/exact/rational';
import { UnsolvedQuantityError, parseProblem } from '../../src/lib/schemas/problem';

interface Vector {
	readonly id: string;
	readonly problem: Readonly<Record<string, unknown>>;
	readonly expect: Readonly<Record<string, number | string>>;
	/** Absolute; 0: the exact rational. */
	readonly tolerance: number;
	readonly source: string;
}

const vectors: readonly Vector[] = JSON.parse(
	readFileSync(new URL('./vectors.json', import.meta.url), 'utf8')
);

/** No solver reaches these yet; whoever adds one takes its lines out. */
const NOT_REACHED_YET = [
	'ic.2.noiseless',
	'ic.2.best',
	'ic.3.best',
	'ic.5.best',
	'ic.10.best',
	'ic.5.concatenation',
	'ic.10.concatenation',
	'visibility.chsh',
	'efficiency.chsh',
	'guessing.chsh.2.2',
	'guessing.chsh.2.5',
	'guessing.chsh.2.7',
	'rac.2.classical',
	'rac.3.quantum'
];

/** Budget per vector: enough for each, and an end for all on a slow machine. */
const SECONDS = 20;
const TIMEOUT = 90_000;

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => undefined
};

function isReached(vector: Vector): boolean {
	try {
		parseProblem(vector.problem);
		return true;
	} catch (error) {
		if (error instanceof UnsolvedQuantityError) return false;
		throw error;
	}
}

function expectNear(found: number | null, wanted: number | string, tolerance: number): void {
	expect(found).not.toBeNull();
	expect(Math.abs((found ?? NaN) - Number(wanted))).toBeLessThanOrEqual(tolerance);
}

function expectValue(result: DoneResult, wanted: number | string, tolerance: number): void {
	if (tolerance > 0) return expectNear(result.value, wanted, tolerance);
	const [exact, expected] = [parseRational(result.exact ?? ''), parseRational(String(wanted))];
	expect(exact).not.toBeNull();
	expect(expected !== null && exact?.equals(expected)).toBe(true);
}

describe('vectors', () => {
	it('reaches all but the ones listed', () => {
		expect(vectors.length).toBeGreaterThan(60);
		const unreached = vectors.filter((vector) => !isReached(vector)).map((vector) => vector.id);
		if (unreached.length > 0) console.info(`no solver yet for ${unreached.join(', ')}`);
		expect(unreached).toEqual(NOT_REACHED_YET);
	});

	const reached = vectors.filter((vector) => !NOT_REACHED_YET.includes(vector.id));
	it.each(reached.map((vector) => [vector.id, vector] as const))(
		'%s',
		async (_, vector) => {
			const problem = parseProblem({ seconds: SECONDS, ...vector.problem });
			const result = await solve(problem, control);
			expect(result).toMatchObject({ status: 'done' });
			if (result.status !== 'done') return;
			for (const [side, wanted] of Object.entries(vector.expect)) {
				if (side === 'value') expectValue(result, wanted, vector.tolerance);
				else if (side === 'upper') expectNear(result.upper, wanted, vector.tolerance);
				else if (side === 'lower') expectNear(result.lower, wanted, vector.tolerance);
				else throw new Error(`nothing compares ${side} yet`);
			}
			expect(verifyResult(result)).toMatchObject({ checked: true });
		},
		TIMEOUT
	);
});
