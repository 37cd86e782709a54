/**
 * Complex vectors and matrices as two Float64Arrays (row-major). `im` is null for a real array:
 * the kernels then skip half to three quarters of the work.
 */
export interface ComplexArray {
	readonly re: Float64Array;
	readonly im: Float64Array | null;
}

export function complexZeros(length: number, real: boolean): ComplexArray {
	return { re: new Float64Array(length), im: real ? null : new Float64Array(length) };
}

export function copyComplex(a: ComplexArray): ComplexArray {
	return { re: a.re.slice(), im: a.im ? a.im.slice() : null };
}

export function setComplex(target: ComplexArray, source: ComplexArray): void {
	target.re.set(source.re);
	if (!target.im) return;
	if (source.im) target.im.set(source.im);
	else target.im.fill(0);
}

export function fillZero(a: ComplexArray): void {
	a.re.fill(0);
	a.im?.fill(0);
}

/** target += factor * source, factor real. */
export function addScaled(target: ComplexArray, factor: number, source: ComplexArray): void {
	addScaledReal(target.re, factor, source.re);
	if (target.im && source.im) addScaledReal(target.im, factor, source.im);
}

export function scaleComplex(a: ComplexArray, factor: number): void {
	for (let i = 0; i < a.re.length; i++) a.re[i] = (a.re[i] ?? 0) * factor;
	if (a.im) for (let i = 0; i < a.im.length; i++) a.im[i] = (a.im[i] ?? 0) * factor;
}

/** Re <a, b>, the conjugate on a. */
export function realDot(a: ComplexArray, b: ComplexArray): number {
	const real = dotReal(a.re, b.re);
	return a.im && b.im ? real + dotReal(a.im, b.im) : real;
}

export function squaredNorm(a: ComplexArray): number {
	return realDot(a, a);
}

/** target -= <a, target> a, for a of norm 1. */
export function removeComponent(target: ComplexArray, a: ComplexArray): void {
	const real = realDot(a, target);
	const imaginary = a.im && target.im ? dotReal(a.re, target.im) - dotReal(a.im, target.re) : 0;
	addScaled(target, -real, a);
	if (!target.im || !a.im) return;
	addScaledReal(target.re, imaginary, a.im);
	addScaledReal(target.im, -imaginary, a.re);
}

function addScaledReal(target: Float64Array, factor: number, source: Float64Array): void {
	for (let i = 0; i < target.length; i++) target[i] = (target[i] ?? 0) + factor * (source[i] ?? 0);
}

function dotReal(a: Float64Array, b: Float64Array): number {
	let sum = 0;
	for (let i = 0; i < a.length; i++) sum += (a[i] ?? 0) * (b[i] ?? 0);
	return sum;
}
