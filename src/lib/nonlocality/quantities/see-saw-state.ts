import {
	addScaled,
	complexZeros,
	copyComplex,
	fillZero,
	realDot,
	removeComponent,
	scaleComplex,
	setComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import { hermitianEigen } from '../linalg/hermitian-eigen';
import { applyToFactor } from '../linalg/tensor-factors';
import type { BellNode, Letter, SeeSawFunctional } from './see-saw-functional';
import type { SeeSawStrategy } from './see-saw-strategy';

/** Krylov dimension: exact for two qutrits and fewer. */
const KRYLOV = 10;
/** A large state starts from the last one and is moved often: a few steps are worth their time. */
const KRYLOV_LARGE = 5;
const LARGE = 64;
/** Below this share of the operator's scale the Krylov space has closed. */
const CLOSED = 1e-13;

function elementOf(strategy: SeeSawStrategy, letter: Letter): ComplexArray {
	const element = strategy.measurements[letter.party]?.[letter.input]?.elements[letter.output];
	if (!element) throw new RangeError(`party ${letter.party} has no operator ${letter.output}`);
	return element;
}

/** out = E_letter vector. */
export function applyLetter(
	strategy: SeeSawStrategy,
	letter: Letter,
	vector: ComplexArray,
	out: ComplexArray
): void {
	const factor = strategy.factors[letter.party];
	if (factor) applyToFactor(elementOf(strategy, letter), factor, vector, out);
}

/** The Bell operator times a vector. */
export function applyBellOperator(
	functional: SeeSawFunctional,
	strategy: SeeSawStrategy,
	vector: ComplexArray
): ComplexArray {
	const products: (ComplexArray | undefined)[] = [];
	const zeros = () => complexZeros(vector.re.length, strategy.real);
	const productOf = (letter: Letter) => {
		const known = products[letter.id];
		if (known) return known;
		const product = zeros();
		applyLetter(strategy, letter, vector, product);
		products[letter.id] = product;
		return product;
	};
	const scratch = zeros();
	const apply = (node: BellNode): ComplexArray => {
		const sum = zeros();
		if (node.scalar !== 0) addScaled(sum, node.scalar, vector);
		for (const { letter, node: child } of node.branches) {
			if (child.branches.length === 0) {
				addScaled(sum, child.scalar, productOf(letter));
				continue;
			}
			const inner = apply(child);
			applyLetter(strategy, letter, inner, scratch);
			addScaled(sum, 1, scratch);
		}
		return sum;
	};
	return apply(functional.root);
}

/** The functional's value on the strategy, as computed (no allowance for rounding). */
export function strategyValue(functional: SeeSawFunctional, strategy: SeeSawStrategy): number {
	return realDot(strategy.state, applyBellOperator(functional, strategy, strategy.state));
}

/**
 * Moves the state to the top of the Bell operator in the Krylov space of `from` (Lanczos with full
 * re-orthogonalisation; Golub and Van Loan, section 10.1). Never lowers the value below that of
 * `from`. Returns the value reached.
 */
export function improveState(
	functional: SeeSawFunctional,
	strategy: SeeSawStrategy,
	poll: () => void,
	from: ComplexArray = strategy.state
): number {
	const { state, real } = strategy;
	const length = state.re.length;
	const size = Math.min(length > LARGE ? KRYLOV_LARGE : KRYLOV, length);
	const basis: ComplexArray[] = [];
	const images = new Float64Array(size * size);
	let next = copyComplex(from);
	scaleComplex(next, 1 / Math.sqrt(squaredNorm(next)));
	while (basis.length < size) {
		poll();
		basis.push(next);
		const image = applyBellOperator(functional, strategy, next);
		const at = basis.length - 1;
		images[at * size + at] = realDot(next, image);
		for (let pass = 0; pass < 2; pass++) for (const v of basis) removeComponent(image, v);
		const norm = Math.sqrt(squaredNorm(image));
		if (norm <= CLOSED * functional.scale || basis.length === size) break;
		images[(at + 1) * size + at] = norm;
		scaleComplex(image, 1 / norm);
		next = image;
	}
	const count = basis.length;
	const small = complexZeros(count * count, true);
	for (let i = 0; i < count; i++)
		for (let j = 0; j <= i; j++) small.re[i * count + j] = images[i * size + j] ?? 0;
	const { values, vectors } = hermitianEigen(small, count);
	let top = 0;
	for (let i = 1; i < count; i++) if ((values[i] ?? 0) > (values[top] ?? 0)) top = i;
	const moved = complexZeros(state.re.length, real);
	fillZero(moved);
	basis.forEach((v, i) => addScaled(moved, vectors.re[top * count + i] ?? 0, v));
	scaleComplex(moved, 1 / Math.sqrt(squaredNorm(moved)));
	setComplex(state, moved);
	return values[top] ?? 0;
}

/** Entries of a state up to which its operator is written out. */
const DENSE = 64;

/** The top eigenvector of sum_j weight_j B_j; null for states of more than 64 entries. */
export function topState(
	functionals: readonly SeeSawFunctional[],
	weights: readonly number[],
	strategy: SeeSawStrategy
): ComplexArray | null {
	const { real } = strategy;
	const length = strategy.state.re.length;
	if (length > DENSE) return null;
	const matrix = complexZeros(length * length, real);
	for (let column = 0; column < length; column++) {
		const unit = complexZeros(length, real);
		unit.re[column] = 1;
		functionals.forEach((functional, j) => {
			const image = applyBellOperator(functional, strategy, unit);
			for (let row = 0; row < length; row++) {
				const at = row * length + column;
				matrix.re[at] = (matrix.re[at] ?? 0) + (weights[j] ?? 0) * (image.re[row] ?? 0);
				if (matrix.im && image.im)
					matrix.im[at] = (matrix.im[at] ?? 0) + (weights[j] ?? 0) * (image.im[row] ?? 0);
			}
		});
	}
	const { values, vectors } = hermitianEigen(matrix, length);
	let top = 0;
	for (let i = 1; i < length; i++) if ((values[i] ?? 0) > (values[top] ?? 0)) top = i;
	const part = (array: Float64Array) => array.slice(top * length, (top + 1) * length);
	return { re: part(vectors.re), im: vectors.im ? part(vectors.im) : null };
}
