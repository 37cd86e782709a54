/**
 * A prime below 2^26: products of two residues stay exact in doubles. It is the one of
 * exact-linear-system.ts, so that systems of the vectors found can be solved there.
 */
const PRIME = 67_108_859;

/**
 * Collects vectors that are linearly independent modulo a prime. Vectors independent there are
 * independent over the rationals too, so the rank found is never too large.
 */
export class ModularBasis {
	readonly #rows: { readonly pivot: number; readonly row: Float64Array }[] = [];

	get rank(): number {
		return this.#rows.length;
	}

	/** The coordinates in which the collected vectors are independent. */
	get pivots(): number[] {
		return this.#rows.map(({ pivot }) => pivot);
	}

	/** Takes an integer vector; false when it depends on those before. */
	add(vector: Float64Array): boolean {
		const rest = vector.map((x) => ((x % PRIME) + PRIME) % PRIME);
		for (const { pivot, row } of this.#rows) {
			const factor = rest[pivot] ?? 0;
			if (factor !== 0) subtract(rest, row, factor, pivot);
		}
		const pivot = rest.findIndex((x) => x !== 0);
		if (pivot < 0) return false;
		const inverse = inverseOf(rest[pivot] ?? 0);
		this.#rows.push({ pivot, row: rest.map((x) => (x * inverse) % PRIME) });
		return true;
	}
}

/** A row is 0 in front of its pivot, and at the pivots of the rows before it. */
function subtract(from: Float64Array, row: Float64Array, factor: number, start: number): void {
	const negative = PRIME - factor;
	for (let k = start; k < from.length; k++)
		from[k] = ((from[k] ?? 0) + negative * (row[k] ?? 0)) % PRIME;
}

/** By the extended Euclidean algorithm. */
function inverseOf(a: number): number {
	let [r0, r1, t0, t1] = [PRIME, a, 0, 1];
	while (r1 !== 0) {
		const quotient = Math.floor(r0 / r1);
		[r0, r1] = [r1, r0 - quotient * r1];
		[t0, t1] = [t1, t0 - quotient * t1];
	}
	return t0 < 0 ? t0 + PRIME : t0;
}
