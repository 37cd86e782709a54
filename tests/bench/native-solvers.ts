import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Contender } from './measure';

/**
 * General-purpose semidefinite solvers (Debian: coinor-csdp, sdpa), one thread, as they come, on
 * our SDPA text; the sample is the whole process, user and system time.
 */
export const NATIVE = [
	{ name: 'csdp', probe: ['csdp'], command: 'csdp "$0" >out.txt' },
	{
		name: 'sdpa',
		probe: ['sdpa'],
		command: 'sdpa -ds "$0" -o result.txt -numThreads 1 >out.txt'
	}
] as const;

export type NativeName = (typeof NATIVE)[number]['name'];

/** One variable, one row: what a solver takes to start, read a file and end. */
export const SMALLEST = '1\n1\n1\n1\n1 1 1 1 1\n';

export function installedSolvers(): NativeName[] {
	return NATIVE.filter(({ probe }) => spawnSync(probe[0]).error === undefined).map(
		({ name }) => name
	);
}

/** Files for native solvers, removed by `close`. */
export class NativeBench {
	readonly #folder = mkdtempSync(join(tmpdir(), 'bench-'));
	#files = 0;

	contender(solver: NativeName, text: string, name: string = solver): Contender {
		const file = join(this.#folder, `problem-${this.#files++}.dat-s`);
		writeFileSync(file, text);
		const command = NATIVE.find((native) => native.name === solver)?.command ?? 'false';
		// A shell may begin with children's time that it was handed down: the difference counts.
		const loop = `times; for ((i = 0; i < $1; i++)); do ${command} || exit 1; done; times`;
		return {
			name,
			sample: (repeats) => {
				const { status, stdout, stderr } = spawnSync('bash', ['-c', loop, file, String(repeats)], {
					cwd: this.#folder,
					encoding: 'utf8',
					env: { ...process.env, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1' }
				});
				if (status !== 0) throw new Error(`${solver} failed: ${stderr.slice(0, 300)}`);
				return Promise.resolve(childrenTime(stdout) / repeats);
			}
		};
	}

	close(): void {
		rmSync(this.#folder, { recursive: true });
	}
}

/** Milliseconds between two outputs of `times`; its second line is the children's, 0m1.2s 0m0.3s. */
function childrenTime(stdout: string): number {
	const lines = stdout.trim().split('\n');
	return readTimes(lines.at(-1)) - readTimes(lines[1]);
}

function readTimes(line = ''): number {
	return line.split(' ').reduce((sum, word) => {
		const [, minutes = 'NaN', seconds = 'NaN'] = /^(\d+)m([\d.]+)s$/.exec(word) ?? [];
		return sum + 1000 * (60 * Number(minutes) + Number(seconds));
	}, 0);
}
