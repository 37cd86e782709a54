import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { givenStrategy } from './given-strategy';
import { localMaximum } from './local-maximum';
import type { Outcome } from './outcome';
import { QuantumEnclosure } from './quantum-enclosure';
import { LevelArm } from './quantum-levels';
import { dimensionsToTry } from './quantum-plan';
import { mostPromising, type Arm } from './quantum-schedule';
import { DimensionArm, GrowthArm } from './quantum-search';
import { stopOfPart } from './search-budget';
import { StrategyGrowth } from './see-saw-growth';
import { searchStrategies } from './strategy-search';

/** Share of the time left that one relaxation or search may take, so that all get their turn. */
const RUN_SHARE = 0.75;
/** The local maximum is a first lower side only, a start another: a share of the budget. */
const FIRST_SHARE = 0.25;

/**
 * Encloses the quantum maximum of g (the supremum over finite-dimensional tensor-product
 * strategies): from below by the best deterministic strategy, by see-saw in several local
 * dimensions and by growing strategies, from above by moment-matrix relaxations of growing level.
 * After the local maximum and a first relaxation the next step is always the one with the largest
 * expected gain per second (quantum-schedule.ts). Stops when upper - lower <= `gap`, when both are
 * in `within`, when `seconds` are over, or when nothing is left to try.
 *
 * Guarantee: both sides are proved, each by its part of the certificate. The two need not meet: the
 * relaxations converge to the commuting-operator value.
 * @throws SolverStop `cancelled` when told to stop, `failed` for constraints or a start that does not
 *   fit, `limit` when neither side could be had
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
			'the quantum maximum under additional constraints has no solver yet; use "npa" or "see-saw" with them'
		);
	return new Escalation(problem, g, control).run();
}

class Escalation {
	readonly #problem: ProblemOf<'quantum'>;
	readonly #g: Functional;
	readonly #control: Control;
	readonly #begin: number;
	readonly #enclosure = new QuantumEnclosure();
	readonly #levels: LevelArm;
	readonly #dimensions: readonly DimensionArm[];
	readonly #growth: StrategyGrowth;
	readonly #grower: GrowthArm | null;
	#local: Record<string, unknown> = {};

	constructor(problem: ProblemOf<'quantum'>, g: Functional, control: Control) {
		this.#problem = problem;
		this.#g = g;
		this.#control = control;
		this.#begin = control.now();
		const passingOn = this.#passingOn();
		this.#levels = new LevelArm(problem, g, this.#enclosure, {
			control: passingOn,
			left: () => this.#left
		});
		this.#growth = new StrategyGrowth(g, { seed: problem.seed, largest: null });
		const around = { problem, g, known: this.#enclosure, control: passingOn };
		this.#dimensions = dimensionsToTry(problem).map(
			(dimension, place) =>
				new DimensionArm(dimension, place === 0, {
					...around,
					onBetter: (strategy) => this.#growth.growFrom(strategy)
				})
		);
		// dimensions that are given are meant to be kept
		this.#grower = problem.dimensions === null ? new GrowthArm(this.#growth, around) : null;
	}

	run(): Outcome {
		this.#tryLocal();
		this.#tryStart();
		while (this.#enclosure.upper === null && this.#left > 0 && this.#levels.open)
			this.#run(this.#levels);
		const arms: readonly Arm[] = [
			this.#levels,
			...this.#dimensions,
			...(this.#grower ? [this.#grower] : [])
		];
		while (!this.#closed && this.#left > 0) {
			const next = mostPromising(arms, this.#enclosure.width);
			if (!next) break;
			this.#run(next);
		}
		return this.#outcome();
	}

	#run(arm: Arm): void {
		arm.run(RUN_SHARE * this.#left);
	}

	get #left(): number {
		const { seconds } = this.#problem;
		return Math.max(0, seconds - (this.#control.now() - this.#begin) / 1000);
	}

	get #closed(): boolean {
		return this.#enclosure.width <= this.#problem.gap || this.#isWithin;
	}

	/** Whether both sides are where the problem says that they are good enough. */
	get #isWithin(): boolean {
		const { within, sense } = this.#problem;
		const { lower, upper } = this.#enclosure;
		if (!within || lower === null || upper === null) return false;
		// The problem speaks about f, this search about g: -f for a minimum.
		const [low, high] = sense === 'min' ? [-within[1], -within[0]] : within;
		return lower >= low && upper <= high;
	}

	#tryLocal(): void {
		const seconds = FIRST_SHARE * this.#problem.seconds;
		try {
			const problem = { ...this.#problem, quantity: 'local', seconds } as const;
			const { lower, certificate } = localMaximum(problem, this.#g, this.#passingOn());
			if (lower === null || certificate?.kind !== 'deterministic-strategy') return;
			this.#enclosure.raise(lower, certificate);
			this.#local = { local: lower };
		} catch (error) {
			this.#local = { localReason: stopOfPart(error).message };
		}
	}

	/** Climbs from the strategy given with the problem. */
	#tryStart(): void {
		const { start, seed, seconds } = this.#problem;
		if (!start) return;
		const from = givenStrategy(this.#g.scenario, start);
		const search = {
			dimensions: from.dimensions,
			from,
			starts: 1,
			firstStart: 0,
			seed,
			seconds: FIRST_SHARE * seconds,
			state: 'free',
			target: null,
			known: null
		} as const;
		const found = searchStrategies(this.#g, search, this.#passingOn());
		this.#enclosure.raise(found.certificate.value, found.certificate);
		this.#growth.growFrom(found.strategy);
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
			? this.#isWithin
				? 'both sides within what was asked'
				: 'gap closed'
			: this.#left > 0
				? 'nothing left to try'
				: 'budget spent';
		const grown = this.#grower?.summary();
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
				levels: this.#levels.done,
				...(grown && { grown }),
				dimensions: this.#dimensions.flatMap((arm) => arm.summary() ?? [])
			},
			certificate: this.#enclosure.certificate()
		};
	}
}
