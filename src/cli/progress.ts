import type { Control, Progress } from '../lib/nonlocality';

/** Progress lines are printed at a new stage, and else at most this often. */
const MILLISECONDS_BETWEEN_LINES = 500;

/** A control for the main thread: never cancels, reports progress on standard error. */
export function consoleControl(): Control {
	let lastStage = '';
	let lastTime = -Infinity;
	return {
		now: () => performance.now(),
		shouldStop: () => false,
		report(progress) {
			const time = performance.now();
			if (progress.stage === lastStage && time - lastTime < MILLISECONDS_BETWEEN_LINES) return;
			lastStage = progress.stage;
			lastTime = time;
			process.stderr.write(`${printProgress(progress)}\n`);
		}
	};
}

function printProgress({ stage, iteration, fraction, lower, upper }: Progress): string {
	const parts = [stage, `iteration ${iteration}`];
	if (fraction !== null) parts.push(`${Math.round(100 * fraction)} %`);
	if (lower !== null) parts.push(`lower ${lower}`);
	if (upper !== null) parts.push(`upper ${upper}`);
	return parts.join(', ');
}
