/** What the module exports; matrices are row-major, pointers are byte offsets in the memory. */
export { factorPanel, packColumns, updateColumns } from './cholesky';
export { multiply, symmetrise, mirror } from './products';
export { buildRows } from './schur';
export {
	addScaled,
	conjugate,
	dot,
	invertFactor,
	inverseFromFactor,
	orthogonalise,
	solveFactored,
	subtractProduct
} from './triangular';
