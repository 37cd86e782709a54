import { SolverStop, type Control, type Level, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { localMaximum } from './local-maximum';
import { npaBound } from './npa-bound';
import type { Outcome } from './outcome';
import { QuantumEnclosure } from './quantum-enclosure';
import { dimensionsToTry, levelsToTry, predictSeconds } from './quantum-plan';
import { partyDimensions, searchStrategies } from './see-saw';
import { StrategyGrowth } from './see-saw-growth';

/** Share of the time left that one relaxation may take, so that both sides get their turn. */
const LEVEL_SHARE = 0.75;
/** A level predicted to take more than this many times what is left is not begun. */
const HOPELESS = 3;
/** The local maximum is a first lower side only: a share of the budget. */
const LOCAL_SHARE = 0.25;
/** Starts of the first visit to a dimension; later visits double it. */
const FIRST_STARTS = 6;
/** Between two levels see-saw gets this share of what the next level is predicted to take. */
const SEARCH_SHARE = 0.5;
/** A level predicted to be this cheap (s) is tried at once. */
const CHEAP_LEVEL = 0.1;
/** Growing begins when no level is left and each small dimension had this many starts. */
const STARTS_BEFORE_GROWTH = 20;
/** A dimension visited with this many starts in all has shown what random starts can reach. */
const MOST_STARTS = 400;

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

interface Visit {
	readonly dimension: number;
	starts: number;
	batch: number;
	seconds: number;
	lower: number | null;
}

class Escalation {
	readonly #problem: ProblemOf<'quantum'>;
	readonly #g: Functional;
	readonly #control: Control;
	readonly #begin: number;
	readonly #enclosure = new QuantumEnclosure();
	readonly #levels: Level[];
	readonly #visits: Visit[];
	readonly #levelsDone: Record<string, unknown>[] = [];
	readonly #growth: StrategyGrowth | null;
	#local: Record<string, unknown> = {};

	constructor(problem: ProblemOf<'quantum'>, g: Functional, control: Control) {
		this.#problem = problem;
		this.#g = g;
		this.#control = control;
		this.#begin = control.now();
		this.#levels = [...levelsToTry(problem)];
		this.#growth =
			problem.dimensions === null && StrategyGrowth.suits(g)
				? new StrategyGrowth(g, problem.seed)
				: null;
		this.#visits = dimensionsToTry(problem).map((dimension) => ({
			dimension,
			starts: 0,
			batch: FIRST_STARTS,
			seconds: 0,
			lower: null
		}));
	}

	run(): Outcome {
		const first = this.#visits[0];
		this.#tryLocal();
		this.#tryLevel();
		if (first && !this.#closed) this.#visit(first, this.#left / 4);
		while (!this.#closed && this.#left > 0) {
			const next = this.#secondsOfNextLevel();
			const more =
				next === null ? this.#searchToTheEnd() : this.#search(this.#slice(next), MOST_STARTS);
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

	/** Null when no level is left that has a chance within the budget. */
	#secondsOfNextLevel(): number | null {
		const level = this.#levels[0];
		if (level === undefined) return null;
		const predicted = predictSeconds(this.#g.scenario, level);
		return predicted > HOPELESS * this.#left ? null : predicted;
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
		while (this.#levels.length > 0) {
			const level = this.#levels.shift();
			if (level === undefined || this.#left === 0) return false;
			const predicted = predictSeconds(this.#g.scenario, level);
			if (predicted > HOPELESS * this.#left && this.#enclosure.upper !== null) {
				const reason = 'not begun: too large for the time left';
				this.#levelsDone.push({ level, reason });
				continue;
			}
			if (this.#runLevel(level)) return true;
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
				if (upper !== null && certificate?.kind === 'npa-dual')
					this.#enclosure.reduce(upper, certificate, level);
				const { size, ending } = method;
				this.#levelsDone.push({ level, upper, size, ending, seconds: elapsed() });
			},
			(reason) => this.#levelsDone.push({ level, reason, seconds: elapsed() })
		);
	}

	#searchToTheEnd(): boolean {
		if (!this.#growth) return this.#search(this.#left, MOST_STARTS);
		this.#search(this.#left / 2, STARTS_BEFORE_GROWTH);
		if (!this.#closed && this.#left > 0) this.#grow(this.#growth);
		return true;
	}

	#grow(growth: StrategyGrowth): void {
		const known = this.#enclosure.lower ?? -Infinity;
		const enough = (this.#enclosure.upper ?? Infinity) - this.#problem.gap / 2;
		const certificate = growth.run(this.#left, known, this.#passingOn(), enough);
		if (certificate) this.#enclosure.raise(certificate.value, certificate);
	}

	/** See-saw for some seconds, least visited dimension first; false when none is left to visit. */
	#search(seconds: number, mostStarts: number): boolean {
		const end = this.#control.now() + 1000 * seconds;
		for (;;) {
			const open = this.#visits.filter((visit) => visit.starts < mostStarts);
			const [visit] = open.sort(
				(a, b) => a.seconds + a.starts * 0.001 - b.seconds - b.starts * 0.001
			);
			if (!visit) return false;
			const left = (end - this.#control.now()) / 1000;
			if (left <= 0 || this.#closed) return true;
			this.#visit(visit, left);
		}
	}

	#visit(visit: Visit, seconds: number): void {
		const start = this.#control.now();
		this.#attempt(
			() => {
				const found = searchStrategies(
					this.#g,
					{
						dimensions: partyDimensions([visit.dimension], this.#problem.outputs.length),
						starts: visit.batch,
						firstStart: visit.starts,
						seed: this.#problem.seed,
						seconds,
						state: 'free',
						target: this.#enclosure.upper,
						known: this.#enclosure.lower
					},
					this.#passingOn()
				);
				visit.starts += found?.startsDone ?? visit.batch;
				visit.batch *= 2;
				if (!found) return;
				const { certificate } = found;
				visit.lower = Math.max(visit.lower ?? -Infinity, certificate.value);
				this.#enclosure.raise(certificate.value, certificate);
			},
			() => (visit.starts = MOST_STARTS)
		);
		visit.seconds += (this.#control.now() - start) / 1000;
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
				...(this.#growth?.dimension && {
					grown: { dimension: this.#growth.dimension, tries: this.#growth.tries }
				}),
				levels: this.#levelsDone,
				dimensions: this.#visits
					.filter(({ starts }) => starts > 0)
					.map(({ dimension, starts, seconds, lower }) => ({ dimension, starts, seconds, lower }))
			},
			certificate: this.#enclosure.certificate()
		};
	}
}
