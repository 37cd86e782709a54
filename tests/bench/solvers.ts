/**
 * CPU time of our moment relaxations, warm, median of five: the solver with its guaranteed bounds,
 * and the independent check of the certificate. Beside it csdp, a general-purpose semidefinite
 * solver (Debian: coinor-csdp), one thread, on our SDPA text: all of its process, and that less what
 * its smallest programme takes. Prints figures, asserts nothing: `npm run --silent bench`.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { loadavg, tmpdir } from 'node:os';
import { join } from 'node:path';
import { solve, verifyResult, type Control, type Level } from '../../src/lib/nonlocality';
import { momentProblemSdpa } from '../../src/lib/nonlocality/quantities/moment-problem-sdpa';
import type { FamilySpec } from '../../src/lib/nonlocality/scenario/families';
import { npaProblem } from '../factories/npa-problem';

const CASES: readonly (readonly [name: string, family: FamilySpec, level: Level])[] = [
	['CHSH, level 1', { name: 'chsh' }, 1],
	['I3322, level 2', { name: 'i3322' }, 2],
	['I3322, level 3', { name: 'i3322' }, 3],
	['CGLMP d=3, 1+AB', { name: 'cglmp', d: 3 }, '1+AB'],
	['CGLMP d=4, 1+AB', { name: 'cglmp', d: 4 }, '1+AB'],
	['CGLMP d=5, 1+AB', { name: 'cglmp', d: 5 }, '1+AB']
];
const RUNS = 5;
const SECONDS = 300;
/** A sample repeats what is faster than this, so that the clock's steps don't count. */
const SHORTEST_SAMPLE = 50;
const MOST_REPEATS = 200;

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => undefined
};

function median(values: readonly number[]): number {
	return values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;
}

function cpu(): number {
	const { user, system } = process.cpuUsage();
	return (user + system) / 1000;
}

/** Milliseconds of CPU per call: median of five samples after two that warm up. */
async function measured(run: () => unknown): Promise<number> {
	await run();
	const start = cpu();
	await run();
	const once = Math.max(cpu() - start, 0.05);
	const repeats = Math.min(MOST_REPEATS, Math.ceil(SHORTEST_SAMPLE / once));
	const samples: number[] = [];
	for (let i = 0; i < RUNS; i++) {
		const before = cpu();
		for (let k = 0; k < repeats; k++) await run();
		samples.push((cpu() - before) / repeats);
	}
	return median(samples);
}

/** One variable, one row: what csdp takes to start, read a file and end. */
const SMALLEST = '1\n1\n1\n1\n1 1 1 1 1\n';

/** Milliseconds of CPU (user and system) of one csdp process, its start included. */
function timeCsdp(text: string): number {
	const folder = mkdtempSync(join(tmpdir(), 'csdp-'));
	try {
		const file = join(folder, 'problem.dat-s');
		writeFileSync(file, text);
		const sample = (repeats: number) => {
			const loop =
				'TIMEFORMAT="%U %S"; time for ((i = 0; i < $1; i++)); do csdp "$0" >csdp.out; done';
			const { stderr } = spawnSync('bash', ['-c', loop, file, String(repeats)], {
				cwd: folder,
				encoding: 'utf8',
				env: { ...process.env, OMP_NUM_THREADS: '1' }
			});
			const [user = NaN, system = NaN] =
				stderr.trim().split('\n').at(-1)?.split(' ').map(Number) ?? [];
			return (1000 * (user + system)) / repeats;
		};
		const repeats = Math.min(MOST_REPEATS, Math.ceil(SHORTEST_SAMPLE / Math.max(1, sample(1))));
		return median(Array.from({ length: RUNS }, () => sample(repeats)));
	} finally {
		rmSync(folder, { recursive: true });
	}
}

const shown = (milliseconds: number | undefined) =>
	(milliseconds === undefined || Number.isNaN(milliseconds)
		? '-'
		: milliseconds.toFixed(2)
	).padStart(10);

const installed = spawnSync('csdp').error === undefined;
if (!installed) console.log('csdp is not installed (Debian: coinor-csdp): no comparison');
console.log(`ms of CPU, load ${loadavg()[0]?.toFixed(1)} at the start`);
console.log(
	`${''.padEnd(18)}${'solve'.padStart(10)}${'check'.padStart(10)}${'csdp'.padStart(10)}${'less start'.padStart(12)}`
);
const start = installed ? timeCsdp(SMALLEST) : NaN;
for (const [name, family, level] of CASES) {
	const problem = { ...npaProblem(family, level), seconds: SECONDS };
	const solving = await measured(() => solve(problem, control));
	const result = await solve(problem, control);
	const checking = result.status === 'done' ? await measured(() => verifyResult(result)) : NaN;
	const theirs = installed ? timeCsdp(momentProblemSdpa(problem)) : undefined;
	console.log(
		`${name.padEnd(18)}${shown(solving)}${shown(checking)}${shown(theirs)}  ${shown(theirs && theirs - start)}`
	);
}
