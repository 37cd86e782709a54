import { SolverStop, type Control, type Level, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { localMaximum } from './local-maximum';
import { npaBound } from './npa-bound';
import type { Outcome } from './outcome';
import { QuantumEnclosure } from './quantum-enclosure';
import { levelsToTry, predictSeconds } from './quantum-plan';
import { StrategyEscalation } from './quantum-search';

/** Share of the time left that one relaxation may take, so that both sides get their turn. */
const LEVEL_SHARE = 0.75;
/** A level predicted to take more than this many times what is left is not begun. */
const HOPELESS = 3;
/** The local maximum is a first lower side only: a share of the budget. */
const LOCAL_SHARE = 0.25;
/** Between two levels see-saw gets this share of what the next level is predicted to take. */
const SEARCH_SHARE = 0.5;
/** A level predicted to be this cheap (s) is tried at once. */
const CHEAP_LEVEL = 0.1;

/**
 * Encloses the quantum maximum of g (the supremum over finite-dimensional tensor-product
 * strategies): from below by the best deterministic strategy and by see-saw in growing local
 * dimensions, from above by moment-matrix relaxations of growing level, cheap ones first.
 * Stops when upper - lower <= `gap`, when `seconds` are over, or when nothing is left to try.
 *
 * Guarantee: both sides are proved, each by its part of the certificate. The two need not meet: the
 * relaxations converge to the commuting-operator value.
 * @throws SolverStop `cancelled` when told to stop, `failed` for constraints, `limit` when neither
 *   side could be had
 * @see Navascues, Pironio, Acin, New J. Phys. 10, 073013 (2008); Werner and Wolf, Quantum Inf.
 *   Comput. 1(3), 1 (2001)
 */
export function quantumMaximum(
	problem: ProblemOf<'quantum'>,
	g: Functional,
	control: Control
): Outcome {
	if (problem.constraints.length > 0)
		throw new SolverStop(
			'failed',
			'the quantum maximum under additional constraints has no solver yet; use "npa" with them'
		);
	return new Escalation(problem, g, control).run();
}

class Escalation {
	readonly #problem: ProblemOf<'quantum'>;
	readonly #g: Functional;
	readonly #control: Control;
	readonly #begin: number;
	readonly #enclosure = new QuantumEnclosure();
	readonly #levels: Level[];
	readonly #levelsDone: Record<string, unknown>[] = [];
	readonly #strategies: StrategyEscalation;
	#local: Record<string, unknown> = {};

	constructor(problem: ProblemOf<'quantum'>, g: Functional, control: Control) {
		this.#problem = problem;
		this.#g = g;
		this.#control = control;
		this.#begin = control.now();
		this.#levels = [...levelsToTry(problem)];
		this.#strategies = new StrategyEscalation(problem, g, this.#enclosure, this.#passingOn());
	}

	run(): Outcome {
		this.#tryLocal();
		this.#tryLevel();
		if (!this.#closed) this.#strategies.begin(this.#left / 4);
		while (!this.#closed && this.#left > 0) {
			const next = this.#secondsOfNextLevel();
			const more =
				next === null
					? this.#strategies.searchToTheEnd(this.#left)
					: this.#strategies.search(this.#slice(next));
			if (this.#closed) break;
			const tried = this.#tryLevel();
			if (!more && !tried) break;
		}
		return this.#outcome();
	}

	get #left(): number {
		const { seconds } = this.#problem;
		return Math.max(0, seconds - (this.#control.now() - this.#begin) / 1000);
	}

	get #closed(): boolean {
		return this.#enclosure.width <= this.#problem.gap;
	}

	/** Seconds of see-saw before a level of the predicted cost. */
	#slice(levelSeconds: number): number {
		return levelSeconds < CHEAP_LEVEL ? 0 : Math.min(SEARCH_SHARE * levelSeconds, this.#left / 2);
	}

	/** Drops the levels that have no chance within the budget; null when none is left. */
	#secondsOfNextLevel(): number | null {
		for (;;) {
			const level = this.#levels[0];
			if (level === undefined) return null;
			const predicted = predictSeconds(this.#g.scenario, level);
			if (predicted <= HOPELESS * this.#left || this.#enclosure.upper === null) return predicted;
			this.#levels.shift();
			this.#levelsDone.push({ level, reason: 'not begun: too large for the time left' });
		}
	}

	#tryLocal(): void {
		const { seconds } = this.#problem;
		this.#attempt(
			() => {
				const problem = {
					...this.#problem,
					quantity: 'local',
					seconds: LOCAL_SHARE * seconds
				} as const;
				const found = localMaximum(problem, this.#g, this.#passingOn());
				const { lower, certificate } = found;
				if (lower === null || certificate?.kind !== 'deterministic-strategy') return;
				this.#enclosure.raise(lower, certificate);
				this.#local = { local: lower };
			},
			(reason) => (this.#local = { localReason: reason })
		);
	}

	/** Runs the next level that has a chance; false when there is none. */
	#tryLevel(): boolean {
		while (this.#left > 0 && this.#secondsOfNextLevel() !== null) {
			const level = this.#levels.shift();
			if (level !== undefined && this.#runLevel(level)) return true;
		}
		return false;
	}

	#runLevel(level: Level): boolean {
		const start = this.#control.now();
		const seconds = LEVEL_SHARE * this.#left;
		const elapsed = () => (this.#control.now() - start) / 1000;
		return this.#attempt(
			() => {
				const problem = {
					...this.#problem,
					quantity: 'npa',
					level,
					nonNegative: false,
					seconds
				} as const;
				const { upper, certificate, method } = npaBound(problem, this.#g, this.#passingOn());
				if (
					upper !== null &&
					(certificate?.kind === 'npa-dual' || certificate?.kind === 'npa-exact')
				)
					this.#enclosure.reduce(upper, certificate, level);
				const { size, ending } = method;
				this.#levelsDone.push({ level, upper, size, ending, seconds: elapsed() });
			},
			(reason) => this.#levelsDone.push({ level, reason, seconds: elapsed() })
		);
	}

	/** A limit or failure of one part is noted, not fatal; false then. Being cancelled ends all. */
	#attempt(work: () => void, note: (reason: string) => void): boolean {
		try {
			work();
			return true;
		} catch (error) {
			if (!(error instanceof SolverStop) || error.status === 'cancelled') throw error;
			if (this.#enclosure.width < 0) throw error;
			note(error.message);
			return false;
		}
	}

	/** The parts' own progress, with the enclosure so far in place of their sides. */
	#passingOn(): Control {
		const control = this.#control;
		return {
			now: () => control.now(),
			shouldStop: () => control.shouldStop(),
			report: ({ stage, iteration }) =>
				control.report({
					stage,
					iteration,
					fraction: Math.min(1, 1 - this.#left / this.#problem.seconds),
					lower: this.#enclosure.lower,
					upper: this.#enclosure.upper
				})
		};
	}

	#outcome(): Outcome {
		const { lower, upper, lowerFrom, upperLevel } = this.#enclosure;
		if (lower === null && upper === null)
			throw new SolverStop('limit', `neither side was found within ${this.#problem.seconds} s`);
		const stopped = this.#closed
			? 'gap closed'
			: this.#left > 0
				? 'nothing left to try'
				: 'budget spent';
		return {
			lower,
			upper,
			value: null,
			tolerance: null,
			optimum: null,
			guaranteed: { lower: lower !== null, upper: upper !== null },
			exact: null,
			method: {
				name: 'local and see-saw from below, NPA from above',
				stopped,
				lowerFrom,
				upperLevel,
				...this.#local,
				levels: this.#levelsDone,
				...this.#strategies.summary()
			},
			certificate: this.#enclosure.certificate()
		};
	}
}
