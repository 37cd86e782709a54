import { ratio, toDoubleUp, type Rational } from '../../../nonlocality/exact/rational';

/** The two sides are taken for one value at this distance, relative above 1: what solvers reach. */
const CLOSED = ratio(1n, 10n ** 7n);

/** A positive gap to two digits, rounded up: `1.8e-7`, `0.00041`, `0.25`. */
export function showGap(gap: Rational): string {
	if (gap.n === 0n) return '0';
	const value = toDoubleUp(gap);
	const exponent = Math.floor(Math.log10(value)) - 1;
	// The double's own rounding is covered by one unit in the last place of what is shown.
	let digits = Math.ceil(value / 10 ** exponent - 1e-9);
	let power = exponent;
	if (digits >= 100) {
		digits = Math.ceil(digits / 10);
		power += 1;
	}
	if (power <= -6) return `${(digits / 10).toFixed(1)}e${power + 1}`;
	return power < 0 ? (digits * 10 ** power).toFixed(-power) : String(digits * 10 ** power);
}

export function isClosed(lower: Rational, upper: Rational): boolean {
	const size = upper.abs().compare(1) > 0 ? upper.abs() : ratio(1n);
	return upper.sub(lower).compare(CLOSED.mul(size)) <= 0;
}
