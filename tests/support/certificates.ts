import { spawnSync } from 'node:child_process';
import type { CheckOutcome } from '../../src/lib/nonlocality/certificates/types';
import type { Finding } from '../../src/lib/ledger/evidence';
import { solve } from '../../src/lib/nonlocality';
import { parseProblem } from '../../src/lib/schemas/problem';

/** The quantum maximum of CHSH, 2 sqrt 2 (Tsirelson 1980). */
export const TSIRELSON = 2 * Math.SQRT2;

/** Clauser and Horne 1974: CH = (CHSH - 2)/4. */
export const CH = {
	collinsGisin: [
		[0, -1, 0],
		[-1, 1, 1],
		[0, 1, -1]
	]
};

/** What our own command line prints. */
export function certify(problem: object): string {
	const { status, stdout, stderr } = spawnSync('node_modules/.bin/tsx', ['src/cli/bound.ts', '-'], {
		input: JSON.stringify(problem),
		encoding: 'utf8',
		timeout: 60_000
	});
	if (status !== 0) throw new Error(stderr);
	return stdout;
}

/** The same without a process of its own, which takes seconds to start. */
export async function solved(problem: object): Promise<string> {
	const control = {
		now: () => performance.now(),
		shouldStop: () => false,
		report: () => undefined
	};
	return JSON.stringify(await solve(parseProblem(problem), control));
}

/** What the check of a finding proved. */
export function sidesOf({ check }: Finding): Extract<CheckOutcome, { checked: true }> {
	if (!check?.checked) throw new Error('not checked');
	return check;
}
