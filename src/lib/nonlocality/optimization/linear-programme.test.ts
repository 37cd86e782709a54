import { describe, expect, it } from 'vitest';
import type { Control } from '../problem';
import { solveLinearProgramme, type LinearProgramme } from './linear-programme';

/** An hour, and no one who stops it. */
const SECONDS = 3600;
const idle: Control = { now: () => 0, shouldStop: () => false, report: () => undefined };

/** In one unknown y, every row `factor * y >= bound`. */
function inOneUnknown(cost: number, rows: [factor: number, bound: number][]): LinearProgramme {
	return {
		costs: Float64Array.of(cost),
		starts: Int32Array.from([...rows, null].keys()),
		indices: new Int32Array(rows.length),
		values: Float64Array.from(rows, ([factor]) => factor),
		lowerBounds: Float64Array.from(rows, ([, bound]) => bound)
	};
}

describe('solveLinearProgramme', () => {
	it('finds the best vertex and its multiplier', async () => {
		const programme = inOneUnknown(1, [
			[1, 0],
			[-2, -3]
		]);
		const { status, primal, multipliers, activeRows } = await solveLinearProgramme(
			programme,
			SECONDS,
			idle
		);
		expect(status).toBe('optimal');
		expect([...primal]).toEqual([1.5]);
		expect([...multipliers].map((m) => m + 0)).toEqual([0, 0.5]);
		expect(activeRows).toEqual([1]);
	});

	it('tells what has no point from what has no bound', async () => {
		const contradiction = inOneUnknown(1, [
			[1, 2],
			[-1, -1]
		]);
		const halfLine = inOneUnknown(1, [[1, 0]]);
		expect((await solveLinearProgramme(contradiction, SECONDS, idle)).status).toBe('infeasible');
		expect((await solveLinearProgramme(halfLine, SECONDS, idle)).status).toBe('unbounded');
	});

	it('ends when it is stopped', async () => {
		const stopped = { ...idle, shouldStop: () => true };
		await expect(
			solveLinearProgramme(inOneUnknown(1, [[-1, -1]]), SECONDS, stopped)
		).rejects.toMatchObject({ status: 'cancelled' });
	});
});
