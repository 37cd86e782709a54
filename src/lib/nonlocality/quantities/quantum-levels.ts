import type { Control, Level, ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { symmetryGroup } from '../scenario/symmetry-group';
import { npaBound } from './npa-bound';
import type { QuantumEnclosure } from './quantum-enclosure';
import { levelsToTry, predictLevel, type LevelForecast } from './quantum-plan';
import { ArmHistory, type Arm } from './quantum-schedule';
import { stopOfPart } from './search-budget';

/** A level predicted to take more than this many times what is left is not begun. */
const HOPELESS = 3;
/** Share of the width that a first level may take off: after it half of what is left, and so on. */
const PRIOR = 1;
/** Predictions shorter than this (s) say nothing about the machine's speed. */
const TELLING = 0.05;

/** The upper side: relaxations of growing level. What can't be done is noted, not fatal. */
export class LevelArm implements Arm {
	readonly history = new ArmHistory(PRIOR);
	readonly #problem: ProblemOf<'quantum'>;
	readonly #g: Functional;
	readonly #enclosure: QuantumEnclosure;
	readonly #control: Control;
	readonly #left: () => number;
	readonly #levels: Level[];
	readonly #done: Record<string, unknown>[] = [];
	readonly #forecasts = new Map<Level, LevelForecast>();
	#order: number | null = null;
	/** Seconds that levels took in place of one predicted. */
	#pace = 1;

	constructor(
		problem: ProblemOf<'quantum'>,
		g: Functional,
		enclosure: QuantumEnclosure,
		{ control, left }: { control: Control; left: () => number }
	) {
		this.#problem = problem;
		this.#g = g;
		this.#enclosure = enclosure;
		this.#control = control;
		this.#left = left;
		this.#levels = [...(problem.levels ?? levelsToTry(problem.outputs.length))];
	}

	/** Drops levels that are refused or have no chance within the time that is left, with a note. */
	get open(): boolean {
		for (;;) {
			const level = this.#levels[0];
			if (level === undefined) return false;
			const { seconds, refused } = this.#forecast(level);
			const hopeless = seconds * this.#pace > HOPELESS * this.#left();
			if (!refused && (!hopeless || this.#enclosure.upper === null)) return true;
			this.#levels.shift();
			const reason = refused ?? 'not begun: too large for the time left';
			this.#done.push({ level, reason });
		}
	}

	get seconds(): number {
		const level = this.#levels[0];
		return level === undefined ? Infinity : this.#forecast(level).seconds * this.#pace;
	}

	#forecast(level: Level): LevelForecast {
		const known = this.#forecasts.get(level);
		if (known) return known;
		const forecast = predictLevel(this.#g, level, () => this.#orderOfSymmetries());
		this.#forecasts.set(level, forecast);
		return forecast;
	}

	#orderOfSymmetries(): number {
		this.#order ??= Number(symmetryGroup(this.#g).order);
		return this.#order;
	}

	/** What was tried, for the result's `method`. */
	get done(): readonly Record<string, unknown>[] {
		return this.#done;
	}

	run(seconds: number): void {
		const level = this.#levels.shift();
		if (level === undefined) return;
		const start = this.#control.now();
		const predicted = this.#forecast(level).seconds;
		const before = this.#enclosure.ceiling;
		const elapsed = () => (this.#control.now() - start) / 1000;
		try {
			const problem = {
				...this.#problem,
				quantity: 'npa',
				level,
				nonNegative: false,
				seconds
			} as const;
			const { upper, certificate, method } = npaBound(problem, this.#g, this.#control);
			const { size, ending } = method;
			this.#done.push({ level, upper, size, ending, seconds: elapsed() });
			if (upper !== null && (certificate?.kind === 'npa-dual' || certificate?.kind === 'npa-exact'))
				this.#enclosure.reduce(upper, certificate, level);
		} catch (error) {
			const { message } = stopOfPart(error);
			if (this.#enclosure.width < 0) throw error;
			this.#done.push({ level, reason: message, seconds: elapsed() });
			return;
		}
		if (predicted > TELLING) this.#pace = elapsed() / predicted;
		this.history.note(before - this.#enclosure.ceiling);
	}
}
