import { ratio, toDoubleDown, toDoubleUp } from '../exact/rational';

/**
 * Reals as integers times 2^-1074: every finite double is one exactly, so sums of doubles are exact
 * and everything else is rounded in a stated direction.
 */
export const SCALE_BITS = 1074n;

const BUFFER = new DataView(new ArrayBuffer(8));

/** @throws RangeError when not finite. */
export function scaleDouble(value: number): bigint {
	if (!Number.isFinite(value)) throw new RangeError(`${value} is not a finite number`);
	BUFFER.setFloat64(0, value);
	const high = BUFFER.getUint32(0);
	const exponent = (high >>> 20) & 0x7ff;
	const fraction = (BigInt(high & 0xfffff) << 32n) | BigInt(BUFFER.getUint32(4));
	const magnitude = exponent === 0 ? fraction : (fraction | (1n << 52n)) << BigInt(exponent - 1);
	return value < 0 ? -magnitude : magnitude;
}

/** floor(a / b) for b > 0; BigInt's own division truncates. */
export function floorDivide(a: bigint, b: bigint): bigint {
	const quotient = a / b;
	return a % b < 0n ? quotient - 1n : quotient;
}

/** The largest double not above / the smallest not below a scaled integer. */
export function unscaleDown(value: bigint): number {
	return toDoubleDown(ratio(value, 1n << SCALE_BITS));
}

export function unscaleUp(value: bigint): number {
	return toDoubleUp(ratio(value, 1n << SCALE_BITS));
}

export function magnitude(value: bigint): bigint {
	return value < 0n ? -value : value;
}
