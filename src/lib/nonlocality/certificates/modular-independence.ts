import type { Scenario } from '../scenario/scenario';

/** 2^31 - 1, a prime: vectors independent modulo it are independent over the rationals. */
const PRIME = 2147483647n;

/**
 * Whether deterministic strategies are shown to be affinely independent: the rank modulo a prime of
 * their rows (for every choice of at most one non-last outcome per party, whether all occur) is their
 * number. The constant 1 is among the columns, so linear independence is affine independence.
 */
export function independentModulo(
	{ outputs }: Scenario,
	strategies: readonly (readonly (readonly number[])[])[]
): boolean {
	const rows = strategies.map((strategy) =>
		outputs.reduce<bigint[]>(
			(row, counts, p) => {
				const own = counts.flatMap((count, x) =>
					Array.from({ length: count - 1 }, (_, a) => (strategy[p]?.[x] === a ? 1n : 0n))
				);
				return row.flatMap((entry) => [entry, ...own.map((other) => entry * other)]);
			},
			[1n]
		)
	);
	const width = rows[0]?.length ?? 0;
	let done = 0;
	for (let column = 0; column < width && done < rows.length; column++) {
		const place = rows.findIndex((row, i) => i >= done && row[column] !== 0n);
		const [pivot, moved] = [rows[place], rows[done]];
		if (!pivot || !moved) continue;
		rows[place] = moved;
		rows[done++] = pivot;
		const inverse = power(pivot[column] ?? 1n, PRIME - 2n);
		for (const row of rows.slice(done)) {
			const factor = ((row[column] ?? 0n) * inverse) % PRIME;
			if (factor === 0n) continue;
			for (let k = column; k < width; k++)
				row[k] = ((row[k] ?? 0n) + (PRIME - factor) * (pivot[k] ?? 0n)) % PRIME;
		}
	}
	return done === rows.length;
}

function power(base: bigint, exponent: bigint): bigint {
	let result = 1n;
	for (let e = exponent; e > 0n; e >>= 1n) {
		if (e & 1n) result = (result * base) % PRIME;
		base = (base * base) % PRIME;
	}
	return result;
}
