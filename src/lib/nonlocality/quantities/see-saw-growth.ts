import type { StrategyCertificate } from '../certificates/types';
import { seededRandom } from '../linalg/seeded-random';
import type { Control } from '../problem';
import type { Functional } from '../scenario/functional';
import { ChainSearch } from './chain-search';
import { paddedStrategy } from './grown-strategy';
import { expectBudgetSpent, pollWithin } from './search-budget';
import { climb } from './see-saw-climb';
import { arrangeForSeeSaw, type SeeSawFunctional } from './see-saw-functional';
import { guaranteedValue } from './see-saw-guarantee';
import { strategyValue } from './see-saw-state';
import type { SeeSawStrategy } from './see-saw-strategy';

/** Largest local dimension of chains by default: 64 x 64 is the largest state of a see-saw. */
const CHAIN_LIMIT = 64;
/** Largest state of padded strategies by default: the certificate takes a megabyte of JSON then. */
const PADDED_ENTRIES = 1600;
/** A grown strategy is grown again soon: only the last one is worth converging. */
const ROUGH = 1e-8;
/** Dimensions added at a time, and perturbations (drawn log-uniformly) that were seen to help. */
const STEP = 2;
/** Tries in the largest dimension without a gain after which padding is over. */
const MOST_FRUITLESS = 12;
const LEAST_PERTURBATION = 1e-3;
const PERTURBATION_RANGE = 300;
/** Streams of the seed that the searches in fixed dimensions will not reach. */
const FIRST_STREAM = 1_000_000;

export interface GrowthOptions {
	readonly seed: number;
	/** Largest local dimension; null for the defaults. */
	readonly largest: number | null;
	/** A strategy to grow from; without one only chains can begin. */
	readonly start?: SeeSawStrategy | null;
}

/**
 * Strategies that grow: suprema that no finite dimension reaches are approached this way where
 * random starts in a fixed dimension stay at a lower value. Two parties with two outputs begin with
 * strategies in chain form; then, and for any other scenario, the best strategy is padded with a few
 * random dimensions, perturbed and climbed from, again and again.
 * @see Pal and Vertesi, Phys. Rev. A 82, 022116 (2010)
 */
export class StrategyGrowth {
	readonly #g: Functional;
	readonly #functional: SeeSawFunctional;
	readonly #seed: number;
	readonly #largest: number;
	readonly #chain: ChainSearch | null;
	#tries = 0;
	#current: SeeSawStrategy | null = null;
	#value = -Infinity;
	#fruitless = 0;

	constructor(g: Functional, { seed, largest, start = null }: GrowthOptions) {
		this.#g = g;
		this.#functional = arrangeForSeeSaw(g);
		this.#seed = seed;
		const parties = g.scenario.outputs.length;
		this.#largest = largest ?? Math.floor(PADDED_ENTRIES ** (1 / parties) + 1e-9);
		this.#chain = ChainSearch.of(g, seed, largest ?? CHAIN_LIMIT);
		if (start) this.growFrom(start);
	}

	/** Goes on from this strategy when it is better than the present one. */
	growFrom(strategy: SeeSawStrategy): void {
		const value = strategyValue(this.#functional, strategy);
		if (value <= this.#value) return;
		// a gain in the roundings is none
		if (value > this.#value + ROUGH * this.#functional.scale) this.#fruitless = 0;
		this.#current = strategy;
		this.#value = value;
	}

	/** The value of the best strategy, as computed. */
	get value(): number {
		return this.#value;
	}

	get tries(): number {
		return this.#tries + (this.#chain?.starts ?? 0);
	}

	/** Local dimensions grown to; null before there was anything to grow. */
	get dimensions(): readonly number[] | null {
		return this.#current?.dimensions ?? null;
	}

	/** Whether it needs no strategy to begin with: chain form applies. */
	get beginsAlone(): boolean {
		return this.#chain !== null;
	}

	/** Whether nothing is left to try. */
	get spent(): boolean {
		const padded = !this.#current || this.#fruitless >= MOST_FRUITLESS;
		return (this.#chain?.spent ?? true) && padded;
	}

	/**
	 * Searches for some seconds; a later call goes on. Returns the best strategy with its guaranteed
	 * value when it exceeds `known`, otherwise null.
	 * @param enough a value that ends the search
	 * @throws SolverStop `cancelled`
	 */
	run(
		seconds: number,
		known: number,
		control: Control,
		enough = Infinity
	): StrategyCertificate | null {
		const poll = pollWithin(control, seconds);
		try {
			while (Math.max(known, this.#value) < enough && !this.spent) {
				if (this.#chain && !this.#chain.spent) this.#chain.next(known, poll);
				else this.#pad(poll);
				this.#takeChain();
				this.#report(known, control);
			}
		} catch (error) {
			expectBudgetSpent(error);
			this.#takeChain();
		}
		if (!this.#current || this.#value <= known) return null;
		return guaranteedValue(this.#g, this.#current);
	}

	#takeChain() {
		if (!this.#chain || this.#chain.value <= this.#value) return;
		const strategy = this.#chain.strategy();
		if (strategy) this.growFrom(strategy);
	}

	#pad(poll: () => void) {
		const old = this.#current;
		if (!old) return;
		const random = seededRandom(this.#seed, FIRST_STREAM + this.#tries++);
		const perturbation = LEAST_PERTURBATION * PERTURBATION_RANGE ** random.uniform();
		const dimensions = old.dimensions.map((d) => Math.max(d, Math.min(d + STEP, this.#largest)));
		const full = dimensions.every((d, party) => d === old.dimensions[party]);
		this.#fruitless = full ? this.#fruitless + 1 : 0;
		const strategy = paddedStrategy(old, dimensions, perturbation, random);
		try {
			const options = { moveState: true, random, best: this.#value, poll, tolerance: ROUGH };
			climb(this.#functional, strategy, options);
		} finally {
			// every step leaves a valid strategy, also where the budget ended it
			this.growFrom(strategy);
		}
	}

	#report(known: number, control: Control) {
		const dimension = this.#current?.dimensions.join(' x ');
		control.report({
			stage: dimension ? `see-saw, grown to dimension ${dimension}` : 'see-saw, growing',
			iteration: this.tries,
			fraction: null,
			lower: Math.max(known, this.#value),
			upper: null
		});
	}
}
