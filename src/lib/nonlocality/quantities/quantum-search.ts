import type { StrategyCertificate } from '../certificates/types';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { ArmHistory, type Arm } from './quantum-schedule';
import { partyDimensions } from './see-saw-dimensions';
import type { StrategyGrowth } from './see-saw-growth';
import type { SeeSawStrategy } from './see-saw-strategy';
import { searchStrategies } from './strategy-search';

/** Starts of the first visit to a dimension; later visits double it. */
const FIRST_STARTS = 6;
/** A dimension visited with this many starts in all has shown what random starts can reach. */
const MOST_STARTS = 400;
/** A visit that takes so many times what was predicted is cut short, but not before so long (s). */
const OVERRUN = 4;
const SHORTEST_VISIT = 0.2;
/** Shares of the width that a first run may take off: the likeliest dimension's, the others'. */
const LIKELIEST = 1 / 2;
const OTHERS = 1 / 8;
/** Seconds of the first run of growing; later ones double it. */
const FIRST_GROWTH = 1;
/** A guess at the seconds of a start, by the entries of its state. */
const SECONDS_OF_START = (entries: number) => 2e-4 * entries ** 1.3;

/** The sides known at present; `raise` takes a better lower one. */
export interface KnownSides {
	readonly lower: number | null;
	readonly upper: number | null;
	readonly width: number;
	/** The sides, infinite while they are not known. */
	readonly floor: number;
	readonly ceiling: number;
	raise(lower: number, certificate: StrategyCertificate): boolean;
}

interface Surroundings {
	readonly problem: ProblemOf<'quantum'>;
	readonly g: Functional;
	readonly known: KnownSides;
	readonly control: Control;
	/** Told of every strategy that raised the lower side. */
	readonly onBetter: (strategy: SeeSawStrategy) => void;
}

/** The lower side by see-saw from random starts in one local dimension. */
export class DimensionArm implements Arm {
	readonly history: ArmHistory;
	readonly dimension: number;
	readonly #around: Surroundings;
	#starts = 0;
	#batch = FIRST_STARTS;
	#spent = 0;
	#lower: number | null = null;

	constructor(dimension: number, isLikeliest: boolean, around: Surroundings) {
		this.dimension = dimension;
		this.history = new ArmHistory(isLikeliest ? LIKELIEST : OTHERS);
		this.#around = around;
	}

	get open(): boolean {
		return this.#starts < MOST_STARTS;
	}

	get seconds(): number {
		if (this.#starts > 0) return (this.#spent / this.#starts) * this.#batch;
		const entries = this.dimension ** this.#around.problem.outputs.length;
		return SECONDS_OF_START(entries) * this.#batch;
	}

	/** What was tried, for the result's `method`; null for nothing. */
	summary(): Record<string, unknown> | null {
		const { dimension } = this;
		const [starts, seconds, lower] = [this.#starts, this.#spent, this.#lower];
		return starts > 0 ? { dimension, starts, seconds, lower } : null;
	}

	run(seconds: number): void {
		const { problem, g, known, control, onBetter } = this.#around;
		const began = control.now();
		const before = known.floor;
		const search = {
			dimensions: partyDimensions([this.dimension], problem.outputs.length),
			starts: this.#batch,
			firstStart: this.#starts,
			seed: problem.seed,
			seconds: Math.min(seconds, Math.max(SHORTEST_VISIT, OVERRUN * this.seconds)),
			state: 'free',
			target: known.upper,
			gap: problem.gap / 2,
			known: known.lower
		} as const;
		try {
			const found = searchStrategies(g, search, control);
			this.#starts += found.startsDone;
			this.#batch *= 2;
			const { certificate } = found;
			this.#lower = Math.max(this.#lower ?? -Infinity, certificate.value);
			if (known.raise(certificate.value, certificate)) onBetter(found.strategy);
		} catch (error) {
			if (!(error instanceof SolverStop) || error.status !== 'limit') throw error;
			this.#starts = MOST_STARTS; // too large: not to be visited again
		}
		const elapsed = (control.now() - began) / 1000;
		this.#spent += elapsed;
		this.history.note(known.floor - before);
	}
}

/** The lower side by strategies that grow, the best one found in fixed dimensions among them. */
export class GrowthArm implements Arm {
	readonly history: ArmHistory;
	readonly #growth: StrategyGrowth;
	readonly #around: Omit<Surroundings, 'onBetter'>;
	#slice = FIRST_GROWTH;

	constructor(growth: StrategyGrowth, around: Omit<Surroundings, 'onBetter'>) {
		this.#growth = growth;
		this.#around = around;
		this.history = new ArmHistory(growth.beginsAlone ? LIKELIEST : OTHERS);
	}

	get open(): boolean {
		return !this.#growth.spent;
	}

	get seconds(): number {
		return this.#slice;
	}

	/** What was tried, for the result's `method`; null for nothing. */
	summary(): Record<string, unknown> | null {
		const { dimensions, tries } = this.#growth;
		return dimensions && tries > 0 ? { dimensions, tries } : null;
	}

	run(seconds: number): void {
		const { problem, known, control } = this.#around;
		const before = known.floor;
		const enough = known.ceiling - problem.gap / 2;
		const slice = Math.min(seconds, this.#slice);
		this.#slice *= 2;
		const found = this.#growth.run(slice, before, control, enough);
		if (found) known.raise(found.value, found);
		this.history.note(known.floor - before);
	}
}
