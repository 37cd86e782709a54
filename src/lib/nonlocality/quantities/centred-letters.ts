/**
 * Letters without gauge: for an input with d outputs the operators A^k = sum_a u_k(a) E_a,
 * k = 0 .. d-2, with sum_a u_k(a) = 0 and (1/d) sum_a u_k(a) u_l(a) = 1 for k = l, else 0. Two
 * outputs give the observable E_0 - E_1. Relabelling outputs turns them by an orthogonal matrix and
 * mixes in no constant. E_a = 1/d + sum_k u_k(a)/d A^k and A^k A^l = [k = l] + sum_j c_klj A^j.
 */
export interface CentredLetters {
	readonly outputs: number;
	/** u_k(a) at k * outputs + a (Helmert's contrasts: orthogonal, the first k + 2 outputs only). */
	readonly weights: Float64Array;
	/** c_klj at (k * (d-1) + l) * (d-1) + j. */
	readonly products: Float64Array;
}

export function centredLetters(outputs: number): CentredLetters {
	const count = outputs - 1;
	const weights = new Float64Array(count * outputs);
	for (let k = 0; k < count; k++) {
		const size = Math.sqrt(outputs / ((k + 1) * (k + 2)));
		weights.fill(size, k * outputs, k * outputs + k + 1);
		weights[k * outputs + k + 1] = -(k + 1) * size;
	}
	const products = new Float64Array(count ** 3);
	const u = (k: number, a: number) => weights[k * outputs + a] ?? 0;
	for (let k = 0; k < count; k++)
		for (let l = 0; l < count; l++)
			for (let j = 0; j < count; j++) {
				let sum = 0;
				for (let a = 0; a < outputs; a++) sum += u(k, a) * u(l, a) * u(j, a);
				products[(k * count + l) * count + j] = Math.abs(sum) < 1e-14 ? 0 : sum / outputs;
			}
	return { outputs, weights, products };
}

/** The orthogonal matrix of a permutation of outputs (a becomes images[a]), row-major. */
export function outputMatrix(letters: CentredLetters, images: readonly number[]): Float64Array {
	const { outputs, weights } = letters;
	const count = outputs - 1;
	const matrix = new Float64Array(count * count);
	for (let k = 0; k < count; k++)
		for (let l = 0; l < count; l++) {
			let sum = 0;
			for (let a = 0; a < outputs; a++)
				sum += (weights[k * outputs + (images[a] ?? 0)] ?? 0) * (weights[l * outputs + a] ?? 0);
			matrix[k * count + l] = Math.abs(sum) < 1e-14 ? 0 : sum / outputs;
		}
	return matrix;
}
