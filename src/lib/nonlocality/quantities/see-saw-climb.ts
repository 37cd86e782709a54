import { improveMeasurements } from './see-saw-measurement';
import { improveState, strategyValue } from './see-saw-state';
import { randomVector, tidyMeasurement, type SeeSawStrategy } from './see-saw-strategy';
import type { SeeSawFunctional } from './see-saw-functional';
import type { SeededRandom } from '../linalg/seeded-random';

/** A climb has converged when an iteration gains less than this share of the scale. */
const CONVERGED = 1e-15;
/** Far more than any climb that still has something to win was seen to need. */
const MAX_ITERATIONS = 5000;
/** Before this many iterations no climb is given up: the first ones gain unevenly. */
const PATIENCE = 20;
/** A climb is given up when this many times the gain that its pace promises would not suffice. */
const OPTIMISM = 10;
/** Rounding errors in the bases grow by about one an iteration; they are cleared this often. */
const CLEAN_EVERY = 50;

export interface ClimbOptions {
	/** False: the state stays as it is. */
	readonly moveState: boolean;
	readonly random: SeededRandom;
	/** The best value known: a climb that will not reach it is given up. */
	readonly best: number;
	/** Gain of an iteration, as a share of the scale, at which the climb ends (default 1e-15). */
	readonly tolerance?: number;
	/** Called at least every 100 ms; throws to stop the climb where it is. */
	readonly poll: () => void;
}

export interface Climb {
	readonly value: number;
	readonly iterations: number;
	readonly converged: boolean;
}

/**
 * Alternating maximisation from a given strategy, which it changes in place: the measurements of
 * one party after the other, then the state. The value never falls; every step leaves a valid
 * strategy, also when `poll` throws.
 * @see Werner and Wolf, Quantum Inf. Comput. 1(3), 1 (2001); Pal and Vertesi, Phys. Rev. A 82,
 *   022116 (2010)
 */
export function climb(
	functional: SeeSawFunctional,
	strategy: SeeSawStrategy,
	{ moveState, random, best, poll, tolerance = CONVERGED }: ClimbOptions
): Climb {
	const stateStep = (from = strategy.state) =>
		moveState
			? improveState(functional, strategy, poll, from)
			: strategyValue(functional, strategy);
	let value = stateStep();
	let gain = Infinity;
	let restarted = false;
	for (let iteration = 1; iteration <= MAX_ITERATIONS; iteration++) {
		strategy.measurements.forEach((_, party) => {
			improveMeasurements(functional, strategy, party, poll);
		});
		if (iteration % CLEAN_EVERY === 0) cleanBases(strategy);
		const next = stateStep();
		const pace = gain > 0 ? Math.min(Math.max((next - value) / gain, 0), 0.999) : 0;
		gain = next - value;
		value = next;
		if (iteration > PATIENCE && value + (OPTIMISM * gain * pace) / (1 - pace) < best)
			return { value, iterations: iteration, converged: false };
		if (gain > tolerance * functional.scale) continue;
		// The Krylov space of an eigenvector is closed: only a fresh vector can show a higher one.
		if (restarted || !moveState) {
			cleanBases(strategy);
			return { value: stateStep(), iterations: iteration, converged: true };
		}
		restarted = true;
		const { state, real } = strategy;
		const kept = { re: state.re.slice(), im: state.im ? state.im.slice() : null };
		const fresh = randomVector(state.re.length, real, random);
		const nudge = NUDGE / Math.sqrt(state.re.length);
		for (let i = 0; i < kept.re.length; i++) {
			kept.re[i] = (kept.re[i] ?? 0) + nudge * (fresh.re[i] ?? 0);
			if (kept.im) kept.im[i] = (kept.im[i] ?? 0) + nudge * (fresh.im?.[i] ?? 0);
		}
		value = Math.max(value, stateStep(kept));
		gain = Infinity;
	}
	cleanBases(strategy);
	return { value: stateStep(), iterations: MAX_ITERATIONS, converged: false };
}

/** Enough of every eigenvector to be found, little enough to be cleared again by one Lanczos run. */
const NUDGE = 1e-3;

function cleanBases(strategy: SeeSawStrategy): void {
	strategy.measurements.forEach((row, party) => {
		const size = strategy.dimensions[party] ?? 1;
		for (const measurement of row) tidyMeasurement(measurement, size);
	});
}
