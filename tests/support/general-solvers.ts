/**
 * General-purpose semidefinite solvers from Debian's packages, one thread each, on programmes in the
 * SDPA sparse format: `csdp` (coinor-csdp; Borchers, Optim. Methods Softw. 11, 613 (1999)) and `sdpa`
 * (Fujisawa, Kojima, Nakata, Yamashita).
 */
import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

export type GeneralSolver = 'csdp' | 'sdpa';

export const GENERAL_SOLVERS: readonly GeneralSolver[] = ['csdp', 'sdpa'];

/** csdp ends at a relative gap of 1e-8, sdpa at 1e-7, both with defaults. */
export const RELATIVE_TOLERANCE: Readonly<Record<GeneralSolver, number>> = {
	csdp: 5e-8,
	sdpa: 5e-7
};

const ONE_THREAD = { ...process.env, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1' };

export function isInstalled(solver: GeneralSolver): boolean {
	return spawnSync(solver, { env: ONE_THREAD }).error === undefined;
}

/**
 * The optimal value of a programme "minimise c.x" in the SDPA sparse format: the mean of the primal
 * and the dual value that the solver prints. NaN when it printed none.
 */
export function solveGenerally(solver: GeneralSolver, text: string): number {
	const folder = mkdtempSync(join(tmpdir(), `${solver}-`));
	try {
		const file = join(folder, 'problem.dat-s');
		const out = join(folder, 'out');
		writeFileSync(file, text);
		const options = { cwd: folder, encoding: 'utf8', env: ONE_THREAD } as const;
		if (solver === 'csdp') return meanOf(execFileSync('csdp', [file, out], options), CSDP_VALUES);
		execFileSync('sdpa', ['-ds', file, '-o', out], { ...options, stdio: 'ignore' });
		return meanOf(readFileSync(out, 'utf8'), SDPA_VALUES);
	} finally {
		rmSync(folder, { recursive: true });
	}
}

const CSDP_VALUES = [/Primal objective value:\s*(\S+)/, /Dual objective value:\s*(\S+)/];
const SDPA_VALUES = [/objValPrimal\s*=\s*(\S+)/, /objValDual\s*=\s*(\S+)/];

function meanOf(printed: string, patterns: readonly RegExp[]): number {
	const values = patterns.map((pattern) => Number(pattern.exec(printed)?.[1]));
	return values.reduce((sum, value) => sum + value, 0) / values.length;
}
