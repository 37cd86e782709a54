import { stepScratch } from '../linalg/kernels/plain-step';
import { makeKernels, type KernelDemand, type Kernels } from '../linalg/kernels/kernels';
import {
	backtrack,
	mehrotraCentring,
	runInteriorPoint,
	SMALLEST_STEP,
	type InteriorPointMethod,
	type Iterate,
	type SolverEnd,
	type SolverHooks,
	type SolverOptions
} from './interior-point-loop';
import type { MomentProgramme } from './moment-programme';

/** Fraction of the way to the boundary that a step takes. */
const STEP_FRACTION = 0.95;
/** The start's diagonal exceeds what dominance needs by this share. */
const DOMINANCE = 1.1;

/** What the solver takes of the kernels' memory: n x n matrices, Lanczos' basis, a few vectors. */
function demandOf(n: number): KernelDemand {
	return { doubles: 16 * (n + 3) ** 2 + stepScratch(n) + 20 * n, arrays: 60, order: n };
}

/**
 * Level 1 of the moment-matrix hierarchy where every measurement has two outcomes. In observables
 * O = 2 E - 1 the moment matrix G of {1, O_1, ...} has unit diagonal and free entries elsewhere, so
 * the relaxation is "maximise <C, G> with diag(G) = 1, G >= 0" and its dual "minimise sum(lambda)
 * with Diag(lambda) - C >= 0": n variables where the general form has n (n - 1) / 2 moments.
 * Primal-dual interior-point method with Mehrotra's corrector; both sides stay feasible throughout.
 *
 * Iterates are handed over in the general form (moments of projectors, their multiplier), so that
 * bounds are proved and certificates written as for every other relaxation.
 * Cost: some ten dense products of n x n matrices an iteration; 10 to 20 iterations.
 * Tsirelson, J. Soviet Math. 36, 557 (1987); Wehner, Phys. Rev. A 73, 022110 (2006); the method
 * after Helmberg, Rendl, Vanderbei, Wolkowicz, SIAM J. Optim. 6, 342 (1996).
 */
export class LevelOneDual implements InteriorPointMethod {
	readonly #programme: MomentProgramme;
	readonly #hooks: SolverHooks;
	readonly #kernels: Kernels;
	readonly #stepScratch: Float64Array;
	readonly #n: number;
	/** Value of the functional on uncorrelated coins: its constant in observables. */
	readonly #constant: number;
	readonly #c: Float64Array;
	readonly #lambda: Float64Array;
	readonly #x: Float64Array;
	readonly #z: Float64Array;
	/** Inverses of the Cholesky factors of X and Z, and W = Z^-1. */
	readonly #inverseX: Float64Array;
	readonly #inverseZ: Float64Array;
	readonly #w: Float64Array;
	readonly #factor: Float64Array;
	readonly #schur: Float64Array;
	/** Scratch: a matrix before a move or a product, and a diagonal one. */
	readonly #work: Float64Array;
	readonly #diagonal: Float64Array;
	readonly #predictor: Direction;
	readonly #corrected: Direction;

	/** @param programme one that `suits`, its objective scaled to entries of about 1 */
	constructor(programme: MomentProgramme, hooks: SolverHooks) {
		const n = programme.size;
		const kernels = makeKernels(demandOf(n));
		const square = () => kernels.doubles(n * n);
		const direction = () => ({ dx: square(), dLambda: kernels.doubles(n) });
		const { constant, matrix } = inObservables(programme);
		this.#programme = programme;
		this.#hooks = hooks;
		this.#kernels = kernels;
		this.#stepScratch = kernels.doubles(stepScratch(n));
		this.#n = n;
		this.#constant = constant;
		this.#c = square();
		this.#c.set(matrix);
		this.#lambda = kernels.doubles(n);
		this.#x = square();
		this.#z = square();
		this.#inverseX = square();
		this.#inverseZ = square();
		this.#w = square();
		this.#factor = square();
		this.#schur = square();
		this.#work = square();
		this.#diagonal = square();
		this.#predictor = direction();
		this.#corrected = direction();
	}

	/** Whether every cell above the diagonal is a moment of its own and nothing else is imposed. */
	static suits({ size: n, unknowns, index, rows, equalities }: MomentProgramme): boolean {
		if (rows.length > 0 || equalities.length > 0 || unknowns !== (n * (n - 1)) / 2) return false;
		for (let i = 1; i < n; i++) if (index[i * n + i] !== index[i]) return false;
		return !index.includes(-1);
	}

	/** Once only: the iterates' arrays are given back when it ends. */
	run(options: SolverOptions): SolverEnd {
		try {
			return runInteriorPoint(this, this.#hooks, options);
		} finally {
			this.#kernels.release();
		}
	}

	begin(): boolean {
		const n = this.#n;
		let scale = 0;
		for (const value of this.#c) scale = Math.max(scale, Math.abs(value));
		for (let i = 0; i < n; i++) {
			let sum = 0;
			for (let j = 0; j < n; j++) sum += Math.abs(this.#c[i * n + j] ?? 0);
			this.#lambda[i] = DOMINANCE * sum + (scale || 1);
			this.#x[i * n + i] = 1;
		}
		return this.#factorX() && this.#factorZ();
	}

	#factorX(): boolean {
		const n = this.#n;
		this.#factor.set(this.#x);
		if (!this.#kernels.factorCholesky(this.#factor, n)) return false;
		this.#kernels.invertFactor(this.#factor, n, this.#inverseX);
		return true;
	}

	#factorZ(): boolean {
		const n = this.#n;
		for (let cell = 0; cell < n * n; cell++) this.#z[cell] = -(this.#c[cell] ?? 0);
		for (let i = 0; i < n; i++) this.#z[i * n + i] = this.#lambda[i] ?? 0;
		this.#factor.set(this.#z);
		if (!this.#kernels.factorCholesky(this.#factor, n)) return false;
		this.#kernels.invertFactor(this.#factor, n, this.#inverseZ);
		this.#kernels.inverseFromFactor(this.#inverseZ, n, this.#w);
		return true;
	}

	advance(): boolean {
		const n = this.#n;
		for (let cell = 0; cell < n * n; cell++)
			this.#schur[cell] = (this.#w[cell] ?? 0) * (this.#x[cell] ?? 0);
		if (!this.#kernels.factorCholesky(this.#schur, n)) return false;
		const mu = this.#kernels.dot(this.#x, this.#z) / n;
		const predictor = this.#solve(0, null, this.#predictor);
		this.#hooks.poll();
		const target = this.#centring(predictor, mu) * mu;
		const direction = this.#solve(target, predictor, this.#corrected);
		this.#hooks.poll();
		return this.#moveX(direction.dx) + this.#moveLambda(direction.dLambda) > SMALLEST_STEP;
	}

	/**
	 * Fills `direction`: dX = target W - X - sym(W D X) [- sym(W D' dX')] with D = Diag(dLambda) such
	 * that diag(dX) = 0.
	 */
	#solve(target: number, predictor: Direction | null, direction: Direction): Direction {
		const n = this.#n;
		const { dx, dLambda } = direction;
		const x = this.#x;
		const w = this.#w;
		for (let i = 0; i < n; i++) {
			let rest = target * (w[i * n + i] ?? 0) - (x[i * n + i] ?? 0);
			if (predictor)
				for (let k = 0; k < n; k++)
					rest -=
						(w[i * n + k] ?? 0) * (predictor.dLambda[k] ?? 0) * (predictor.dx[i * n + k] ?? 0);
			dLambda[i] = rest;
		}
		this.#kernels.solveFactored(this.#schur, n, dLambda);
		for (let k = 0; k < n; k++)
			for (let j = 0; j < n; j++) {
				const cell = k * n + j;
				let value = (dLambda[k] ?? 0) * (x[cell] ?? 0);
				if (predictor) value += (predictor.dLambda[k] ?? 0) * (predictor.dx[cell] ?? 0);
				this.#work[cell] = value;
			}
		this.#kernels.multiply(w, this.#work, dx, n);
		this.#kernels.symmetrise(dx, n);
		for (let cell = 0; cell < n * n; cell++)
			dx[cell] = target * (w[cell] ?? 0) - (x[cell] ?? 0) - (dx[cell] ?? 0);
		for (let i = 0; i < n; i++) dx[i * n + i] = 0; // rounding must not leave the unit diagonal
		return direction;
	}

	#centring({ dx, dLambda }: Direction, mu: number): number {
		const n = this.#n;
		const stepX = Math.min(1, this.#largestStep(this.#inverseX, dx));
		const stepZ = Math.min(1, this.#lambdaStep(dLambda));
		let ahead = this.#kernels.dot(this.#x, this.#z) + stepX * this.#kernels.dot(dx, this.#z);
		for (let i = 0; i < n; i++) ahead += stepZ * (dLambda[i] ?? 0); // X keeps its unit diagonal
		return mehrotraCentring(ahead / n / mu, Math.min(stepX, stepZ));
	}

	#largestStep(inverse: Float64Array, direction: Float64Array): number {
		return this.#kernels.largestStep(inverse, direction, this.#stepScratch, this.#n);
	}

	#lambdaStep(dLambda: Float64Array): number {
		for (let i = 0; i < this.#n; i++) this.#diagonal[i * this.#n + i] = dLambda[i] ?? 0;
		return this.#largestStep(this.#inverseZ, this.#diagonal);
	}

	/** Returns the step taken; 0 leaves everything as it was. */
	#moveX(dx: Float64Array): number {
		this.#work.set(this.#x);
		const wanted = Math.min(1, STEP_FRACTION * this.#largestStep(this.#inverseX, dx));
		const taken = backtrack(wanted, (step) => {
			this.#x.set(this.#work);
			this.#kernels.addScaled(this.#x, step, dx);
			return this.#factorX();
		});
		if (taken === 0) this.#x.set(this.#work);
		return taken;
	}

	#moveLambda(dLambda: Float64Array): number {
		const before = this.#lambda.slice();
		const wanted = Math.min(1, STEP_FRACTION * this.#lambdaStep(dLambda));
		const taken = backtrack(wanted, (step) => {
			this.#lambda.set(before);
			this.#kernels.addScaled(this.#lambda, step, dLambda);
			return this.#factorZ();
		});
		if (taken === 0) {
			this.#lambda.set(before);
			this.#factorZ();
		}
		return taken;
	}

	measure(iteration: number): Iterate {
		const empty = new Float64Array(0);
		return {
			iteration,
			moments: this.#momentsOfProjectors(),
			multiplier: this.#multiplierOfProjectors(),
			rowMultipliers: empty,
			equalityMultipliers: empty,
			primal: this.#constant + this.#kernels.dot(this.#c, this.#x),
			dual: this.#constant + this.#lambda.reduce((sum, value) => sum + value, 0),
			residual: 0
		};
	}

	/** <E_i> = (1 + G_0i) / 2 and <E_i E_j> = (1 + G_0i + G_0j + G_ij) / 4. */
	#momentsOfProjectors(): Float64Array {
		const n = this.#n;
		const { index, unknowns } = this.#programme;
		const x = this.#x;
		const moments = new Float64Array(unknowns + 1);
		moments[0] = 1;
		for (let i = 1; i < n; i++) {
			moments[index[i] ?? 0] = (1 + (x[i] ?? 0)) / 2;
			for (let j = 1; j < i; j++)
				moments[index[i * n + j] ?? 0] = (1 + (x[i] ?? 0) + (x[j] ?? 0) + (x[i * n + j] ?? 0)) / 4;
		}
		return moments;
	}

	/**
	 * T^t (Diag(lambda) - C) T with (1, O) = T (1, E). Its first column is taken from the equalities
	 * of the multiplier (2 Z_0i + Z_ii = -c_i), which it then meets to the last digit.
	 */
	#multiplierOfProjectors(): Float64Array {
		const n = this.#n;
		const { index, objective } = this.#programme;
		const multiplier = new Float64Array(n * n);
		let corner = 0;
		for (let i = 0; i < n; i++) {
			corner += this.#lambda[i] ?? 0;
			for (let j = 0; j < i; j++)
				corner += 2 * (i > 0 && j > 0 ? 1 : -1) * (this.#z[i * n + j] ?? 0);
		}
		multiplier[0] = corner;
		for (let i = 1; i < n; i++) {
			for (let j = 1; j <= i; j++) {
				const value = 4 * (this.#z[i * n + j] ?? 0);
				multiplier[i * n + j] = value;
				multiplier[j * n + i] = value;
			}
			const first = -((objective[index[i] ?? 0] ?? 0) + (multiplier[i * n + i] ?? 0)) / 2;
			multiplier[i] = first;
			multiplier[i * n] = first;
		}
		return multiplier;
	}
}

interface Direction {
	readonly dx: Float64Array;
	readonly dLambda: Float64Array;
}

/** The objective as constant + <C, G>, from coefficients of projectors: E = (1 + O) / 2. */
function inObservables({ size: n, index, objective }: MomentProgramme) {
	const matrix = new Float64Array(n * n);
	let constant = objective[0] ?? 0;
	const add = (i: number, j: number, value: number) => {
		matrix[i * n + j] = (matrix[i * n + j] ?? 0) + value / 2;
		matrix[j * n + i] = (matrix[j * n + i] ?? 0) + value / 2;
	};
	for (let i = 1; i < n; i++) {
		const single = objective[index[i] ?? 0] ?? 0;
		constant += single / 2;
		add(0, i, single / 2);
		for (let j = 1; j < i; j++) {
			const joint = (objective[index[i * n + j] ?? 0] ?? 0) / 4;
			if (joint === 0) continue;
			constant += joint;
			add(0, i, joint);
			add(0, j, joint);
			add(i, j, joint);
		}
	}
	return { constant, matrix };
}
