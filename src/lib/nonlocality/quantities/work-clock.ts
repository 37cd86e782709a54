import { SolverStop, type Control } from '../problem';

/**
 * Keeps a solver within its budget: `check()` ends it (by SolverStop) when it was told to stop or
 * when its time is over. Call it at least every 100 ms of work.
 */
export class WorkClock {
	readonly #control: Control;
	readonly #end: number;
	readonly #seconds: number;

	constructor(control: Control, seconds: number) {
		this.#control = control;
		this.#seconds = seconds;
		this.#end = control.now() + 1000 * seconds;
	}

	/** Seconds left, never negative. */
	get left(): number {
		return Math.max(0, (this.#end - this.#control.now()) / 1000);
	}

	/** @throws SolverStop */
	check(): void {
		if (this.#control.shouldStop()) throw new SolverStop('cancelled', 'stopped on request');
		if (this.#control.now() > this.#end)
			throw new SolverStop('limit', `the budget of ${this.#seconds} s was used up`);
	}
}
