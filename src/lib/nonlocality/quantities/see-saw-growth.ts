import type { StrategyCertificate } from '../certificates/types';
import { seededRandom } from '../linalg/seeded-random';
import type { Control } from '../problem';
import type { Functional } from '../scenario/functional';
import { chainStrategy, paddedStrategy } from './grown-strategy';
import { BudgetSpent, pollWithin } from './search-budget';
import { climb } from './see-saw-climb';
import { arrangeForSeeSaw, type SeeSawFunctional } from './see-saw-functional';
import { guaranteedValue } from './see-saw-guarantee';
import { strategyValue } from './see-saw-state';
import type { SeeSawStrategy } from './see-saw-strategy';

/**
 * Largest local dimension by default: the certificate of I3322 is 0.7 MB of JSON then, and grows
 * with the square.
 */
export const GROWTH_LIMIT = 40;
/** Local dimensions of the chain starts. */
const LEAST_START = 12;
const START_CHOICES = 3;
/** A start is grown once it exceeds what small dimensions reach by this share of the scale. */
const WORTHWHILE = 1e-6;
/** A grown strategy is grown again soon: only the last one is worth converging. */
const ROUGH = 1e-8;
/** Dimensions added at a time, and perturbations (drawn log-uniformly) that were seen to help. */
const STEP = 2;
const LEAST_PERTURBATION = 1e-3;
const PERTURBATION_RANGE = 300;
/** Streams of the seed that the searches in fixed dimensions will not reach. */
const FIRST_STREAM = 1_000_000;

/**
 * Strategies that grow: a real two-party strategy that beats the small dimensions is padded with a
 * few random ones, perturbed and climbed from, again and again. Suprema that no finite dimension
 * reaches are approached this way where random starts in a fixed dimension stay at a lower value.
 * @see Pal and Vertesi, Phys. Rev. A 82, 022116 (2010)
 */
export class StrategyGrowth {
	readonly #g: Functional;
	readonly #functional: SeeSawFunctional;
	readonly #seed: number;
	readonly #largest: number;
	#tries = 0;
	#current: SeeSawStrategy | null = null;
	#value = -Infinity;

	constructor(g: Functional, seed: number, largest = GROWTH_LIMIT) {
		this.#g = g;
		this.#functional = arrangeForSeeSaw(g);
		this.#seed = seed;
		this.#largest = largest;
	}

	/** Chain starts are made of 2 x 2 blocks, one vector for each of two outputs. */
	static suits(g: Functional): boolean {
		const { outputs } = g.scenario;
		return outputs.length === 2 && outputs.flat().every((count) => count === 2);
	}

	get tries(): number {
		return this.#tries;
	}

	/** Local dimension grown to; null before a start was worth growing. */
	get dimension(): number | null {
		return this.#current?.dimensions[0] ?? null;
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
		const worthwhile = known + WORTHWHILE * this.#functional.scale;
		for (let open = true; open && this.#value < enough;) {
			const random = seededRandom(this.#seed, FIRST_STREAM + this.#tries++);
			const perturbation = LEAST_PERTURBATION * PERTURBATION_RANGE ** random.uniform();
			const dimension = this.#dimensionOfNext(random.integer(START_CHOICES));
			const strategy = this.#current
				? paddedStrategy(this.#current, dimension, perturbation, random)
				: chainStrategy(this.#g.scenario.outputs, dimension, random);
			let value: number;
			try {
				const options = { moveState: true, random, best: -Infinity, poll, tolerance: ROUGH };
				value = climb(this.#functional, strategy, options).value;
			} catch (error) {
				if (!(error instanceof BudgetSpent)) throw error;
				value = strategyValue(this.#functional, strategy);
				open = false;
			}
			if (value > Math.max(worthwhile, this.#value)) {
				this.#current = strategy;
				this.#value = value;
			}
			control.report({
				stage: `see-saw, grown to dimension ${dimension}`,
				iteration: this.#tries,
				fraction: null,
				lower: Math.max(known, this.#value),
				upper: null
			});
		}
		if (!this.#current || this.#value <= known) return null;
		return guaranteedValue(this.#g, this.#current);
	}

	#dimensionOfNext(choice: number): number {
		const now = this.dimension;
		const wanted = now === null ? LEAST_START + STEP * choice : now + STEP;
		return Math.min(wanted, this.#largest);
	}
}
