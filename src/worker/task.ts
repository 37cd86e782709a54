import type { MessagePort } from 'node:worker_threads';
import { SolverStop, sdpaText, solve, verifyResult } from '../lib/nonlocality/index';
import type { CheckOutcome } from '../lib/nonlocality/certificates/types';
import type { Control, Problem, Progress, Result } from '../lib/nonlocality/problem';
import {
	canonicalPlace,
	type CanonicalPlace,
	type PlacedFunctional
} from '../lib/nonlocality/scenario/canonical-place';

/** What a solver thread can be asked; plain data, so that it crosses the thread's border. */
export type SolverTask =
	| {
			readonly kind: 'solve';
			readonly problem: Problem;
			/** Set to 1 to stop the solver: a busy thread gets no messages. */
			readonly stop: Int32Array;
			readonly port: MessagePort | null;
	  }
	| { readonly kind: 'verify'; readonly result: Result }
	| { readonly kind: 'sdpa'; readonly problem: Problem }
	| { readonly kind: 'place'; readonly functional: PlacedFunctional };

/** A programme, or why there is none: an error loses what it is on its way out of a thread. */
export type PrintedProgramme = { readonly text: string } | { readonly refused: string };

export type SolvedTask = { readonly result: Result; readonly check: CheckOutcome | null };

/** Progress is a courtesy: more often than this it only costs. */
const REPORT_EVERY_MS = 250;

/**
 * Solves a problem and checks what it found with the independent code; the value of a box has no
 * certificate but the problem itself, which is evaluated again.
 */
export async function solveAndCheck(problem: Problem, control: Control): Promise<SolvedTask> {
	const result = await solve(problem, control);
	if (result.status !== 'done') return { result, check: null };
	control.report({
		stage: 'checking the certificate',
		iteration: 0,
		fraction: null,
		lower: result.lower,
		upper: result.upper
	});
	return { result, check: await verifyResult(result) };
}

export function controlOf(stop: Int32Array, send: (progress: Progress) => void): Control {
	let last = -Infinity;
	return {
		now: () => performance.now(),
		shouldStop: () => Atomics.load(stop, 0) !== 0,
		report(progress) {
			const now = performance.now();
			if (now - last < REPORT_EVERY_MS) return;
			last = now;
			send(progress);
		}
	};
}

function printProgramme(problem: Problem): PrintedProgramme {
	try {
		return { text: sdpaText(problem) };
	} catch (error) {
		if (error instanceof SolverStop) return { refused: error.message };
		throw error;
	}
}

export async function runTask(
	task: SolverTask
): Promise<SolvedTask | CheckOutcome | CanonicalPlace | PrintedProgramme> {
	switch (task.kind) {
		case 'solve': {
			const { port } = task;
			try {
				const control = controlOf(task.stop, (progress) => port?.postMessage(progress));
				return await solveAndCheck(task.problem, control);
			} finally {
				port?.close();
			}
		}
		case 'verify':
			return verifyResult(task.result);
		case 'sdpa':
			return printProgramme(task.problem);
		case 'place':
			return canonicalPlace(task.functional);
	}
}
