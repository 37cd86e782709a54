/**
 * Reproducible random numbers: the same seed gives the same stream on every machine, so that a
 * stored seed and start number are enough to repeat a search.
 *
 * Generator: xoshiro128** seeded by splitmix32 (Blackman, Vigna, ACM Trans. Math. Softw. 47, 36
 * (2021)); normal deviates by the polar method of Marsaglia and Bray (SIAM Rev. 6, 260 (1964)).
 */
export interface SeededRandom {
	/** Uniform in [0, 1), 53 bits. */
	uniform(): number;
	/** Standard normal. */
	normal(): number;
	/** Uniform integer in 0 .. bound-1. */
	integer(bound: number): number;
}

const TWO_TO_MINUS_53 = 2 ** -53;

function splitmix32(seed: number): () => number {
	let state = seed | 0;
	return () => {
		state = (state + 0x9e3779b9) | 0;
		let mixed = Math.imul(state ^ (state >>> 16), 0x21f0aaad);
		mixed = Math.imul(mixed ^ (mixed >>> 15), 0x735a2d97);
		return (mixed ^ (mixed >>> 15)) >>> 0;
	};
}

const rotateLeft = (word: number, by: number) => (word << by) | (word >>> (32 - by));

/** A stream for each pair of seed and stream number; both are taken modulo 2^32. */
export function seededRandom(seed: number, stream = 0): SeededRandom {
	const next = splitmix32(Math.imul(Math.trunc(seed), 0x85ebca6b) ^ Math.imul(stream, 0xc2b2ae35));
	let a = next();
	let b = next();
	let c = next();
	let d = next() | 1; // the all-zero state is the one forbidden
	let spare: number | null = null;

	const word = (): number => {
		const result = Math.imul(rotateLeft(Math.imul(b, 5), 7), 9) >>> 0;
		const shifted = b << 9;
		c ^= a;
		d ^= b;
		b ^= c;
		a ^= d;
		c ^= shifted;
		d = rotateLeft(d, 11);
		return result;
	};
	const uniform = () => ((word() >>> 5) * 0x4000000 + (word() >>> 6)) * TWO_TO_MINUS_53;
	const normal = (): number => {
		if (spare !== null) {
			const kept = spare;
			spare = null;
			return kept;
		}
		for (;;) {
			const x = 2 * uniform() - 1;
			const y = 2 * uniform() - 1;
			const square = x * x + y * y;
			if (square === 0 || square >= 1) continue;
			const factor = Math.sqrt((-2 * Math.log(square)) / square);
			spare = y * factor;
			return x * factor;
		}
	};
	return { uniform, normal, integer: (bound) => Math.floor(uniform() * bound) };
}
