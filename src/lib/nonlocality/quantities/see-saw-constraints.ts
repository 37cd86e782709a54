import { ascend, type Landscape } from '../optimization/limited-memory-ascent';
import type { ConstraintForm } from '../scenario/constraint-form';
import type { Functional } from '../scenario/functional';
import { arrangeForSeeSaw, type SeeSawFunctional } from './see-saw-functional';
import { topState } from './see-saw-state';
import type { SeeSawStrategy } from './see-saw-strategy';
import {
	movedStrategy,
	strategyGradient,
	valuesOf,
	type StrategyTangent,
	type StrategyValues
} from './strategy-slope';

/** Rounds of the augmented Lagrangian, and steps of the ascent in each. */
const ROUNDS = 18;
const STEPS = 150;
/** First weight of what is violated, as a share of the functional's scale, and its growth. */
const FIRST_WEIGHT = 10;
/** Times the other for squares of violations, which are small: a start must not run off first. */
const SQUARE_WEIGHT = 100;
const WEIGHT_GROWTH = 10;
/** Beyond it the ascent no longer makes progress in doubles. */
const LARGEST_WEIGHT = 1e7;
/** A violation that falls to this share in a round needs no larger weight. */
const FALLS = 0.25;
/** In the last step of the state alone: what is left of a vanishing probability is its square. */
const STATE_WEIGHT = 1e10;
/** Violation, as a share of the constraint's coefficients, at which the rounds end. */
const MET = 1e-13;
/** Inequalities are aimed at with so much room, so that rounding leaves them true. */
const ROOM = 1e-10;
/** The last steps towards the constraints alone; a few are enough where they are not flat. */
const RESTORING_SWEEPS = 12;
const FLAT = 1e-10;
/** From this round on a start that stays below the best by this share of the scale is given up. */
const PATIENCE = 6;
const BEHIND = 1e-6;

interface Constraint {
	readonly functional: SeeSawFunctional;
	readonly equality: boolean;
	/** A sum of probabilities that must be 0: its form is never negative, so its weight is enough. */
	readonly vanishing: boolean;
	/** Sum of |coefficients|; its deviations are counted in this unit. */
	readonly unit: number;
	multiplier: number;
}

/**
 * Maximises g over strategies under constraints, by an augmented Lagrangian whose maxima are found
 * by quasi-Newton ascent in the state and all measurements at once (alternating steps stop dead on
 * the constraints). A constraint that a sum of probabilities vanish has no multiplier at its maximum
 * (its gradient vanishes with it): it gets a linear penalty of growing weight, and the state that is
 * best for a far larger one at the end.
 * @see Nocedal and Wright, Numerical Optimization (2nd ed.), chapter 17
 */
export class ConstrainedAscent {
	readonly #functional: SeeSawFunctional;
	readonly #forms: readonly ConstraintForm[];
	readonly #moveState: boolean;
	readonly #poll: () => void;

	constructor(
		g: Functional,
		forms: readonly ConstraintForm[],
		{ moveState, poll }: { moveState: boolean; poll: () => void }
	) {
		this.#functional = arrangeForSeeSaw(g);
		this.#forms = forms;
		this.#moveState = moveState;
		this.#poll = poll;
	}

	/**
	 * The strategy reached from a start, nearly meeting the constraints or not; null when it was given
	 * up because it stays below `best`.
	 */
	run(start: SeeSawStrategy, best: number): SeeSawStrategy | null {
		const constraints = this.#forms.map(readConstraint);
		const { scale } = this.#functional;
		let weight = FIRST_WEIGHT * scale; // of vanishing sums; squares get more
		let squareWeight = SQUARE_WEIGHT * weight;
		let strategy = start;
		let before = Infinity;
		for (let round = 0; round < ROUNDS; round++) {
			const landscape = this.#landscape(constraints, weight, squareWeight);
			const options = { iterations: STEPS, tolerance: 1e-10 * scale };
			strategy = ascend(strategy, landscape, options).point;
			const [value = 0, ...deviations] = this.#values(constraints, strategy);
			let violation = 0;
			constraints.forEach((constraint, j) => {
				const deviation = deviations[j] ?? 0;
				const { equality, vanishing } = constraint;
				if (vanishing) return;
				const next = constraint.multiplier + squareWeight * deviation;
				const slack = constraint.multiplier === 0 && deviation < 0;
				constraint.multiplier = equality ? next : Math.max(0, next);
				violation = Math.max(
					violation,
					equality ? Math.abs(deviation) : slack ? 0 : Math.abs(deviation)
				);
			});
			const penalised = constraints.some(({ vanishing }) => vanishing);
			const heaviest = weight >= LARGEST_WEIGHT * scale;
			if (violation <= MET && (!penalised || heaviest)) break;
			if (round >= PATIENCE && violation < BEHIND && value < best - BEHIND * scale) return null;
			if (!heaviest) weight *= WEIGHT_GROWTH;
			if (violation > FALLS * before && squareWeight < LARGEST_WEIGHT * scale)
				squareWeight *= WEIGHT_GROWTH;
			before = violation;
		}
		return this.#restored(constraints, this.#withBestState(constraints, strategy));
	}

	/**
	 * Steps along the gradient of one violated constraint after the other: what the ascent leaves,
	 * because its square is lost in the value's roundings, falls to the size of roundings itself.
	 */
	#restored(constraints: readonly Constraint[], from: SeeSawStrategy): SeeSawStrategy {
		let strategy = from;
		for (let sweep = 0; sweep < RESTORING_SWEEPS; sweep++) {
			let worst = 0;
			for (const constraint of constraints) {
				const { functional, vanishing, equality, unit } = constraint;
				if (vanishing) continue;
				const values = valuesOf([functional], strategy);
				const deviation = deviationOf(constraint, values.values[0] ?? 0);
				if (!equality && deviation <= 0) continue;
				worst = Math.max(worst, Math.abs(deviation));
				const gradient = this.#gradient([functional], [1 / unit], strategy, values);
				const square = gradient.reduce((sum, entry) => sum + entry * entry, 0);
				// a flat constraint has no direction to step in
				if (square < FLAT) continue;
				strategy = movedStrategy(
					strategy,
					gradient.map((entry) => (-deviation / square) * entry)
				);
			}
			if (worst <= MET * 1e-2) break;
		}
		return strategy;
	}

	#gradient(
		functionals: readonly SeeSawFunctional[],
		weights: readonly number[],
		strategy: SeeSawStrategy,
		values: StrategyValues
	): StrategyTangent {
		const gradient = strategyGradient(functionals, weights, strategy, values, this.#poll);
		const { re, im } = strategy.state;
		if (!this.#moveState) gradient.fill(0, 0, re.length + (im?.length ?? 0));
		return gradient;
	}

	#values(constraints: readonly Constraint[], strategy: SeeSawStrategy): readonly number[] {
		const [value = 0, ...forms] = valuesOf(this.#all(constraints), strategy).values;
		return [value, ...constraints.map((c, j) => deviationOf(c, forms[j] ?? 0))];
	}

	#all(constraints: readonly Constraint[]): readonly SeeSawFunctional[] {
		return [this.#functional, ...constraints.map(({ functional }) => functional)];
	}

	#landscape(
		constraints: readonly Constraint[],
		weight: number,
		squareWeight: number
	): Landscape<SeeSawStrategy> {
		const functionals = this.#all(constraints);
		return {
			poll: this.#poll,
			move: movedStrategy,
			slope: (strategy) => {
				const values = valuesOf(functionals, strategy);
				let value = values.values[0] ?? 0;
				const weights = [1];
				constraints.forEach((constraint, j) => {
					const { multiplier, unit, equality, vanishing } = constraint;
					const deviation = deviationOf(constraint, values.values[j + 1] ?? 0);
					if (vanishing) {
						value -= weight * deviation;
						weights.push(-weight / unit);
						return;
					}
					const force = multiplier + squareWeight * deviation;
					const active = equality ? force : Math.max(0, force);
					value -= (active ** 2 - multiplier ** 2) / (2 * squareWeight);
					weights.push(-active / unit);
				});
				return { value, gradient: this.#gradient(functionals, weights, strategy, values) };
			}
		};
	}

	/** Where nothing but vanishing sums constrains, the best state for the measurements found. */
	#withBestState(constraints: readonly Constraint[], strategy: SeeSawStrategy): SeeSawStrategy {
		if (!this.#moveState || !constraints.every(({ vanishing }) => vanishing)) return strategy;
		const weight = STATE_WEIGHT * this.#functional.scale;
		const weights = [1, ...constraints.map(({ unit }) => -weight / unit)];
		const state = topState(this.#all(constraints), weights, strategy);
		return state ? { ...strategy, state } : strategy;
	}
}

function deviationOf({ unit, equality, vanishing }: Constraint, form: number): number {
	return form / unit + (equality || vanishing ? 0 : ROOM);
}

function readConstraint({ form, equality }: ConstraintForm): Constraint {
	const weights = form.terms.filter(({ events }) => events.length > 0);
	const unit = weights.reduce((sum, { coefficient: c }) => sum + Math.abs(c.value), 0) || 1;
	const bare = weights.length === form.terms.length;
	const positive = bare && weights.every(({ coefficient: c }) => c.value > 0);
	const negative = bare && equality && weights.every(({ coefficient: c }) => c.value < 0);
	return {
		functional: arrangeForSeeSaw(form),
		equality,
		vanishing: positive || negative,
		unit: negative ? -unit : unit,
		multiplier: 0
	};
}
