import { describe, expect, it } from 'vitest';
import { COEFFICIENT_ONE, exactCoefficient } from '../exact/coefficient';
import { ratio } from '../exact/rational';
import { randomFunctional, randomRelabelling } from '../../../../tests/factories/random-functional';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { canonicalForm } from './equivalence';
import { familyFunctional } from './families';
import { makeFunctional, type Functional, type Term } from './functional';
import { correlatorTerms, type Observable } from './observables';
import { relabelFunctional } from './relabelling';
import type { Event } from './scenario';

const range = (n: number) => Array.from({ length: n }, (_, i) => i);
const alike = (parties: number, inputs: number, outputs: number) =>
	range(parties).map(() => range(inputs).map(() => outputs));

/** sum M_xy A_x B_y over n inputs each. */
function xorGame(n: number, entry: (x: number, y: number) => number): Functional {
	const terms = range(n).flatMap((x) =>
		range(n).flatMap((y) =>
			correlatorTerms(exactCoefficient(ratio(BigInt(entry(x, y)))), [
				[0, x],
				[1, y]
			])
		)
	);
	return makeFunctional({ outputs: alike(2, n, 2) }, terms);
}

/** sum over inputs and a of P(a, reply(x, y, a) | x, y): win one way for each a. */
function uniqueGame(
	inputs: number,
	d: number,
	reply: (x: number, y: number, a: number) => number
): Functional {
	const terms = range(inputs).flatMap((x) =>
		range(inputs).flatMap((y) =>
			range(d).map((a): Term => {
				const events: Event[] = [
					[0, x, a],
					[1, y, reply(x, y, a)]
				];
				return { coefficient: COEFFICIENT_ONE, events };
			})
		)
	);
	return makeFunctional({ outputs: alike(2, inputs, d) }, terms);
}

/** sum over all inputs of P(0 ... 0 | x). */
function allZeros(parties: number, inputs: number): Functional {
	const tuples = range(parties).reduce<Event[][]>(
		(lists, p) => lists.flatMap((list) => range(inputs).map((x): Event[] => [...list, [p, x, 0]])),
		[[]]
	);
	return makeFunctional(
		{ outputs: alike(parties, inputs, 2) },
		tuples.map((events) => ({ coefficient: COEFFICIENT_ONE, events }))
	);
}

/** Lines through points of the projective plane over the field of q elements, q prime. */
function plane(q: number): Functional {
	const points = [
		...range(q).flatMap((i) => range(q).map((j) => [1, i, j])),
		...range(q).map((i) => [0, 1, i]),
		[0, 0, 1]
	];
	const meets = (a: number[] = [], b: number[] = []) =>
		a.reduce((sum, v, i) => sum + v * (b[i] ?? 0), 0) % q === 0;
	return xorGame(points.length, (x, y) => (meets(points[x], points[y]) ? 1 : 0));
}

/** Quadratic residues: 1, others: -1, 0 for 0. */
function residue(n: number, q: number): number {
	const rest = ((n % q) + q) % q;
	if (rest === 0) return 0;
	return range(q).some((s) => (s * s) % q === rest) ? 1 : -1;
}

function pairs(): Functional {
	const terms = range(6).flatMap((p) =>
		range(p).flatMap((q) =>
			[0, 1].flatMap((x) =>
				[0, 1].flatMap((y) => {
					const inputs: Observable[] = [
						[q, y],
						[p, x]
					];
					return correlatorTerms(exactCoefficient(ratio(x === 1 && y === 1 ? -1n : 1n)), inputs);
				})
			)
		)
	);
	return makeFunctional({ outputs: alike(6, 2, 2) }, terms);
}

const modulo = (n: number, d: number) => ((n % d) + d) % d;

/** Functionals without structure, with as much as there can be, and with regular structure. */
const CASES: readonly (readonly [string, () => Functional])[] = [
	['random 5 by 5 inputs', () => randomFunctional(alike(2, 5, 2), 1, lehmer(5))],
	['random 5 outputs', () => randomFunctional(alike(2, 2, 5), 1, lehmer(6))],
	['random three parties', () => randomFunctional(alike(3, 3, 2), 1, lehmer(7))],
	['random four parties', () => randomFunctional(alike(4, 2, 2), 1, lehmer(8))],
	['random signs, 20 by 20', () => xorGame(20, random01(9))],
	['CGLMP d=5', () => familyFunctional({ name: 'cglmp', d: 5 })],
	['CGLMP d=12', () => familyFunctional({ name: 'cglmp', d: 12 })],
	['all signs alike, 5 by 5', () => xorGame(5, () => 1)],
	['all signs alike, 20 by 20', () => xorGame(20, () => 1)],
	['identity, 20 by 20', () => xorGame(20, (x, y) => (x === y ? 1 : 0))],
	['ten CHSH side by side', () => xorGame(20, sideBySide)],
	['Hadamard 16', () => xorGame(16, (x, y) => (parity(x & y) ? -1 : 1))],
	['residues modulo 19', () => xorGame(19, (x, y) => residue(x - y, 19))],
	['projective plane of order 3', () => plane(3)],
	['projective plane of order 5', () => plane(5)],
	['equal outputs, 5 by 5 with 2', () => uniqueGame(5, 2, (_x, _y, a) => a)],
	['equal outputs, 2 by 2 with 5', () => uniqueGame(2, 5, (_x, _y, a) => a)],
	['equal outputs, 8 by 8 with 4', () => uniqueGame(8, 4, (_x, _y, a) => a)],
	['a + b = xy modulo 5', () => uniqueGame(5, 5, (x, y, a) => modulo(x * y - a, 5))],
	['a + b = xy modulo 7', () => uniqueGame(7, 7, (x, y, a) => modulo(x * y - a, 7))],
	['chained n=60', () => familyFunctional({ name: 'chained', n: 60 })],
	['magic square', () => familyFunctional({ name: 'magic-square' })],
	['Mermin, six parties', () => familyFunctional({ name: 'mermin', n: 6 })],
	['Svetlichny, six parties', () => familyFunctional({ name: 'svetlichny', n: 6 })],
	['all zeros, four parties', () => allZeros(4, 3)],
	['CHSH of every pair of six', pairs]
];

function random01(seed: number): () => number {
	const random = lehmer(seed);
	return () => 2 * random(2) - 1;
}

function sideBySide(x: number, y: number): number {
	if (x >> 1 !== y >> 1) return 0;
	return x & y & 1 ? -1 : 1;
}

function parity(bits: number): boolean {
	let odd = false;
	for (; bits > 0; bits &= bits - 1) odd = !odd;
	return odd;
}

/** Milliseconds of processor time: other processes don't count. */
function timed<T>(work: () => T): { value: T; milliseconds: number } {
	const before = process.cpuUsage();
	const value = work();
	const { user, system } = process.cpuUsage(before);
	return { value, milliseconds: (user + system) / 1000 };
}

describe('the canonical form takes less than a second', () => {
	it.each(CASES)('%s', (_, make) => {
		const f = make();
		const { value: form, milliseconds } = timed(() => canonicalForm(f));
		expect(form.complete).toBe(true);
		expect(milliseconds).toBeLessThan(1000);
		const again = canonicalForm(relabelFunctional(f, randomRelabelling(f, lehmer(3))));
		expect(again.digest).toBe(form.digest);
	});
});

describe('past the limit of work', () => {
	it.each(CASES.slice(0, 20))('the digest is still that of all relabellings: %s', (_, make) => {
		const f = make();
		const g = relabelFunctional(f, randomRelabelling(f, lehmer(4)));
		const [a, b] = [canonicalForm(f, 0), canonicalForm(g, 0)];
		expect(a.digest).toBe(b.digest);
		expect(a.complete).toBe(b.complete);
	});
});
