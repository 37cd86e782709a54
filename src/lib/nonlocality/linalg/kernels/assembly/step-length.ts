/** Kernels.largestStep: Lanczos' method; constants and scratch as in ../plain-step.ts. */
import { addRow, conjugate, dot } from './triangular';

const MOST_STEPS: i32 = 40;
const RELATIVE_PRECISION: f64 = 0.01;
const EIGENVALUE_PRECISION: f64 = 1e-7;
const FIRST_LOOK: i32 = 4;
const LOOK_EVERY: i32 = 2;
const MOST_LAGUERRE_STEPS: i32 = 60;

export function largestStep(inverse: usize, direction: usize, scratch: usize, n: i32): f64 {
	const steps = min(n, MOST_STEPS);
	const bytes = (<usize>n) << 3;
	const first = scratch + <usize>(steps + 1) * bytes;
	const diagonal = first + 2 * bytes;
	const offDiagonal = diagonal + ((<usize>MOST_STEPS) << 3);
	fillStart(scratch, n);
	let smallest: f64 = 0;
	let vector = scratch;
	for (let step = 0; step < steps; step++) {
		const next = vector + bytes;
		conjugate(inverse, direction, vector, first, first + bytes, next, n);
		store<f64>(diagonal + ((<usize>step) << 3), dot(next, vector, n));
		orthogonalise(scratch, step + 1, next, n);
		const norm = sqrt(dot(next, next, n));
		const last = step + 1 == steps;
		if (last || norm == 0 || (step >= FIRST_LOOK && (step - FIRST_LOOK) % LOOK_EVERY == 0)) {
			const count = step + 1;
			smallest = smallestEigenvalue(diagonal, offDiagonal, count);
			const tail =
				count == n ? 0 : norm * tailOfEigenvector(diagonal, offDiagonal, count, smallest);
			if (last || tail <= RELATIVE_PRECISION * abs(smallest)) {
				smallest -= tail;
				break;
			}
		}
		store<f64>(offDiagonal + ((<usize>step) << 3), norm);
		for (let at = next; at < next + bytes; at += 8) store<f64>(at, load<f64>(at) / norm);
		vector = next;
	}
	return smallest < 0 ? -1 / smallest : Infinity;
}

function fillStart(vector: usize, n: i32): void {
	let squares: f64 = 0;
	for (let i = 0; i < n; i++) {
		const value = 1 + <f64>((i * 7919) % 101) / 101;
		store<f64>(vector + ((<usize>i) << 3), value);
		squares += value * value;
	}
	const norm = sqrt(squares);
	for (let i = 0; i < n; i++) {
		const at = vector + ((<usize>i) << 3);
		store<f64>(at, load<f64>(at) / norm);
	}
}

function orthogonalise(basis: usize, count: i32, v: usize, n: i32): void {
	const stride = (<usize>n) << 3;
	for (let pass = 0; pass < 2; pass++) {
		for (let k = 0; k < count; k++) {
			const row = basis + <usize>k * stride;
			addRow(v, row, -dot(row, v, n), n);
		}
	}
}

function smallestEigenvalue(diagonal: usize, offDiagonal: usize, n: i32): f64 {
	let low: f64 = Infinity;
	let size: f64 = 0;
	let before: f64 = 0;
	for (let i = 0; i < n; i++) {
		const at = (<usize>i) << 3;
		const entry = load<f64>(diagonal + at);
		const after = i + 1 < n ? abs(load<f64>(offDiagonal + at)) : 0;
		low = min(low, entry - before - after);
		size = max(size, abs(entry) + before + after);
		before = after;
	}
	for (let step = 0; step < MOST_LAGUERRE_STEPS; step++) {
		const length = laguerreStep(diagonal, offDiagonal, n, low);
		if (!(length > 0)) break;
		low += length;
		if (length <= EIGENVALUE_PRECISION * size) break;
	}
	return low;
}

function laguerreStep(diagonal: usize, offDiagonal: usize, n: i32, x: f64): f64 {
	let first: f64 = 0;
	let second: f64 = 0;
	let inverse: f64 = 0;
	let u: f64 = 0;
	let v: f64 = 0;
	let off: f64 = 0;
	for (let i = 0; i < n; i++) {
		const ratio = off * off * inverse;
		const pivot = load<f64>(diagonal) - x - ratio;
		if (!(pivot > 0)) return 0;
		inverse = 1 / pivot;
		v = ratio * (v - 2 * u * u) * inverse;
		u = (ratio * u - 1) * inverse;
		first += u;
		second += u * u - v;
		off = load<f64>(offDiagonal);
		diagonal += 8;
		offDiagonal += 8;
	}
	const count = <f64>n;
	const root = sqrt(max(0, (count - 1) * (count * second - first * first)));
	return count / (root - first);
}

function tailOfEigenvector(diagonal: usize, offDiagonal: usize, n: i32, eigenvalue: f64): f64 {
	let previous: f64 = 0;
	let current: f64 = 1;
	let squares: f64 = 1;
	let before: f64 = 0;
	for (let i = 0; i + 1 < n; i++) {
		const at = (<usize>i) << 3;
		const off = load<f64>(offDiagonal + at);
		if (off == 0) return 0;
		const next = -((load<f64>(diagonal + at) - eigenvalue) * current + before * previous) / off;
		previous = current;
		current = next;
		before = off;
		squares += next * next;
	}
	return abs(current) / sqrt(squares);
}
