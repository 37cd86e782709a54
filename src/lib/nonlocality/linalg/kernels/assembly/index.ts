/** What the module exports; matrices are row-major, pointers are byte offsets in the memory. */
export { factorPanel, packColumns, updateColumns } from './cholesky';
export { multiply, symmetrise, mirror } from './products';
export { buildRows } from './schur';
export { largestStep } from './step-length';
export {
	addScaled,
	dot,
	invertFactor,
	inverseFromFactor,
	solveFactored,
	subtractProduct
} from './triangular';
