/** One way to narrow an enclosure: the next relaxation, more starts in a dimension, growing. */
export interface Arm {
	/** False when nothing is left to try. */
	readonly open: boolean;
	readonly history: ArmHistory;
	/** Seconds that the next run is predicted to take. */
	readonly seconds: number;
	/** Runs for about so many seconds at most. */
	run(seconds: number): void;
}

/** What a run that is still to come is expected to gain, as a share of the last one's gain. */
const FADES = 0.25;

/**
 * What the runs of an arm gained so far, and what the next one may be expected to: a share of the
 * width (`prior`) before the first run and half as much after each; or a quarter of the last gain, if
 * that is more. Gains of relaxations and of searches alike were seen to shrink by that much or more,
 * and an arm without gain for some time is not quite given up.
 */
export class ArmHistory {
	readonly #prior: number;
	#runs = 0;
	#lastGain = 0;

	constructor(prior: number) {
		this.#prior = prior;
	}

	/** A first side (an infinite gain) says nothing on the next one. */
	note(gain: number): void {
		this.#runs++;
		this.#lastGain = Number.isFinite(gain) ? gain : 0;
	}

	expectedGain(width: number): number {
		return Math.min(
			width,
			Math.max(FADES * this.#lastGain, (width * this.#prior) / 2 ** this.#runs)
		);
	}
}

/** Below the clock's resolution runs count as this long (s). */
const SHORTEST = 1e-3;

/** The open arm with the largest expected gain per second; null when none is open. */
export function mostPromising<A extends Arm>(arms: readonly A[], width: number): A | null {
	// before both sides are known every gain is compared with the same unit
	const scale = Number.isFinite(width) ? width : 1;
	let best: A | null = null;
	let bestRate = -Infinity;
	for (const arm of arms) {
		if (!arm.open) continue;
		const rate = arm.history.expectedGain(scale) / Math.max(SHORTEST, arm.seconds);
		if (rate > bestRate) [best, bestRate] = [arm, rate];
	}
	return best;
}
