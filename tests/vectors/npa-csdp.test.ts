/**
 * Our moment-matrix bounds against `csdp`, a general-purpose semidefinite solver (Debian's
 * coinor-csdp), through the SDPA text: it must lie between our two sides up to its own tolerance.
 */
import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { Level } from '../../src/lib/nonlocality/problem';
import { momentProblemSdpa } from '../../src/lib/nonlocality/quantities/moment-problem-sdpa';
import { makeMomentProblem } from '../../src/lib/nonlocality/quantities/moment-problem';
import { npaBound } from '../../src/lib/nonlocality/quantities/npa-bound';
import { functionalToMaximise } from '../../src/lib/nonlocality/scenario/problem-functional';
import { PATIENT, npaProblem } from '../factories/npa-problem';

const installed = spawnSync('csdp').error === undefined;
if (!installed)
	console.warn('csdp is not installed (Debian: coinor-csdp): its comparison is skipped');

/** csdp stops at a relative gap of 1e-8. */
const CSDP_TOLERANCE = 5e-8;

function solveWithCsdp(text: string): number {
	const folder = mkdtempSync(join(tmpdir(), 'csdp-'));
	try {
		const file = join(folder, 'problem.dat-s');
		writeFileSync(file, text);
		const printed = execFileSync('csdp', [file], {
			cwd: folder,
			encoding: 'utf8',
			env: { ...process.env, OMP_NUM_THREADS: '1' }
		});
		return Number(/Dual objective value:\s*(\S+)/.exec(printed)?.[1]);
	} finally {
		rmSync(folder, { recursive: true });
	}
}

describe.skipIf(!installed)('csdp agrees', () => {
	const cases: [string, ReturnType<typeof npaProblem>][] = [
		...([1, '1+AB', 2] as Level[]).map((level): [string, ReturnType<typeof npaProblem>] => [
			`I3322 level ${String(level)}`,
			npaProblem({ name: 'i3322' }, level)
		]),
		['I3322 level 1, P >= 0', npaProblem({ name: 'i3322' }, 1, { nonNegative: true })],
		['I3322 level 1, minimum', npaProblem({ name: 'i3322' }, 1, { sense: 'min' })],
		['CHSH level 1', npaProblem({ name: 'chsh' }, 1)],
		['tilted CHSH level 2', npaProblem({ name: 'tilted-chsh', alpha: 1 }, 2)],
		['CGLMP d=3 level 1', npaProblem({ name: 'cglmp', d: 3 }, 1)],
		['CGLMP d=3 level 1, P >= 0', npaProblem({ name: 'cglmp', d: 3 }, 1, { nonNegative: true })],
		['CGLMP d=3 level 1+AB', npaProblem({ name: 'cglmp', d: 3 }, '1+AB')],
		['CGLMP d=4 level 1+AB', npaProblem({ name: 'cglmp', d: 4 }, '1+AB')],
		['Svetlichny n=3, one per party', npaProblem({ name: 'svetlichny', n: 3 }, { perParty: 1 })],
		['Mermin n=3 level 2, P >= 0', npaProblem({ name: 'mermin', n: 3 }, 2, { nonNegative: true })],
		[
			'CHSH level 1+AB with a constraint',
			npaProblem({ name: 'chsh' }, '1+AB', {
				constraints: [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1/4' }]
			})
		]
	];
	test.each(cases)('%s', (_, problem) => {
		const g = functionalToMaximise(problem);
		const constant = makeMomentProblem(problem, g).programme.objective[0] ?? 0;
		const theirs = constant - solveWithCsdp(momentProblemSdpa(problem));
		const { lower, upper, optimum } = npaBound(problem, g, PATIENT);
		const tolerance = CSDP_TOLERANCE * (1 + Math.abs(theirs));
		expect(theirs).toBeLessThan((upper ?? NaN) + tolerance);
		expect(theirs).toBeGreaterThan((lower ?? NaN) - tolerance);
		expect(Math.abs(theirs - (optimum ?? NaN))).toBeLessThan(tolerance);
	});
});
