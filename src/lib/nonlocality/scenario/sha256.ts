/** SHA-256 (FIPS 180-4), for digests of canonical forms where no platform module may be used. */

/** The first 32 bits of the fractional part of x. */
function fractionBits(x: number): number {
	return Math.floor((x - Math.floor(x)) * 2 ** 32) >>> 0;
}

function firstPrimes(count: number): number[] {
	const primes: number[] = [];
	for (let n = 2; primes.length < count; n++) if (primes.every((p) => n % p !== 0)) primes.push(n);
	return primes;
}

const PRIMES = firstPrimes(64);
/** Fractional parts of the cube roots of the first 64 primes, of the square roots of the first 8. */
const ROUND_CONSTANTS = PRIMES.map((p) => fractionBits(Math.cbrt(p)));
const INITIAL_HASH = PRIMES.slice(0, 8).map((p) => fractionBits(Math.sqrt(p)));

const rotate = (x: number, by: number) => (x >>> by) | (x << (32 - by));

/**
 * SHA-256 of a text's UTF-8 bytes, in hexadecimal.
 * @example sha256('abc') // 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'
 */
export function sha256(text: string): string {
	const bytes = new TextEncoder().encode(text);
	const padded = new Uint8Array((((bytes.length + 8) >> 6) + 1) << 6);
	padded.set(bytes);
	padded[bytes.length] = 0x80;
	const view = new DataView(padded.buffer);
	view.setBigUint64(padded.length - 8, BigInt(bytes.length) * 8n);
	const hash = Uint32Array.from(INITIAL_HASH);
	for (let offset = 0; offset < padded.length; offset += 64) compress(hash, view, offset);
	return [...hash].map((word) => word.toString(16).padStart(8, '0')).join('');
}

function compress(hash: Uint32Array, view: DataView, offset: number): void {
	const w = new Uint32Array(64);
	const at = (i: number) => w[i] ?? 0;
	for (let i = 0; i < 16; i++) w[i] = view.getUint32(offset + 4 * i);
	for (let i = 16; i < 64; i++) {
		const [x, y] = [at(i - 15), at(i - 2)];
		const s0 = rotate(x, 7) ^ rotate(x, 18) ^ (x >>> 3);
		const s1 = rotate(y, 17) ^ rotate(y, 19) ^ (y >>> 10);
		w[i] = at(i - 16) + s0 + at(i - 7) + s1;
	}
	let [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0, h = 0] = hash;
	for (let i = 0; i < 64; i++) {
		const s1 = rotate(e, 6) ^ rotate(e, 11) ^ rotate(e, 25);
		const choice = (e & f) ^ (~e & g);
		const t1 = (h + s1 + choice + (ROUND_CONSTANTS[i] ?? 0) + at(i)) >>> 0;
		const s0 = rotate(a, 2) ^ rotate(a, 13) ^ rotate(a, 22);
		const majority = (a & b) ^ (a & c) ^ (b & c);
		[h, g, f, e, d, c, b, a] = [g, f, e, (d + t1) >>> 0, c, b, a, (t1 + s0 + majority) >>> 0];
	}
	[a, b, c, d, e, f, g, h].forEach((word, i) => (hash[i] = (hash[i] ?? 0) + word));
}
