/**
 * The local maximum by plain enumeration, from scratch for every strategy: slow, simple, and without
 * any code of the solvers.
 */
import { exactOfDouble, ratio, type Rational } from '../exact/rational';
import type { Functional, Term } from '../scenario/functional';

/** Terms looked at in all (strategies times terms): about a second in doubles, in BigInt. */
const DOUBLE_WORK_LIMIT = 2 ** 26;
const BIGINT_WORK_LIMIT = 2 ** 22;
/** The same for a facet test, in BigInt: some seconds. */
const FACET_WORK_LIMIT = 2 ** 24;

/** The maximum over all strategies, or null when that takes too long here. */
export function enumerateAgain(g: Functional): Rational | null {
	const { answering, others, work } = planOf(g, g.terms.length);
	if (work > DOUBLE_WORK_LIMIT) return null;

	const { scaled, common } = scaleToIntegers(g);
	const sum = scaled.reduce((total, c) => total + (c < 0n ? -c : c), 0n);
	if (sum >= 2n ** 53n) {
		if (work > BIGINT_WORK_LIMIT) return null;
		return ratio(enumerateExactly(g, scaled, others, answering), common);
	}
	return ratio(BigInt(enumerateInDoubles(g, scaled, others, answering)), common);
}

/**
 * Whether h is 0 at every deterministic strategy at which g has its maximum; null when that takes too
 * long here. With the other parties fixed, the answering one picks any best output for each input, and
 * h is a sum over these inputs: it vanishes for all picks when it does for one and no input's pick
 * makes a difference.
 */
export function vanishesWhereBest(g: Functional, h: Functional, maximum: Rational): boolean | null {
	const { answering, others, work } = planOf(g, g.terms.length + h.terms.length);
	if (work > FACET_WORK_LIMIT) return null;
	const [own, other] = [scaleToIntegers(g), scaleToIntegers(h)];
	const most = maximum.mul(ratio(own.common));
	const target = most.s * most.n;
	const [layout, second] = [layOut(g, others, answering), layOut(h, others, answering)];
	let vanishes = true;
	forEachAssignment(others, (outputs) => {
		const cells = cellsAt(layout, own.scaled, outputs);
		const choices = layout.ranges.map(([first, count]) => {
			const list = cells.slice(first, first + count);
			const best = list.reduce((a, b) => (a > b ? a : b));
			return { best, places: list.flatMap((value, a) => (value === best ? [first + a] : [])) };
		});
		if (choices.reduce((sum, { best }) => sum + best, cells[0] ?? 0n) !== target) return;
		const values = cellsAt(second, other.scaled, outputs);
		let sum = values[0] ?? 0n;
		for (const { places } of choices) {
			const [value = 0n, ...rest] = places.map((place) => values[place] ?? 0n);
			if (rest.some((x) => x !== value)) vanishes = false;
			sum += value;
		}
		if (sum !== 0n) vanishes = false;
	});
	return vanishes;
}

/** The party with most strategies answers; the work is assignments of the others times `terms`. */
function planOf({ scenario: { outputs } }: Functional, terms: number) {
	const counts = outputs.map((row) => row.reduce((product, count) => product * count, 1));
	const answering = counts.indexOf(Math.max(...counts));
	const others = outputs.flatMap((row, p) =>
		p === answering ? [] : row.map((count, x) => ({ p, x, count }))
	);
	const work = others.reduce((product, { count }) => product * count, terms);
	return { answering, others, work };
}

function scaleToIntegers({ terms }: Functional) {
	const common = terms.reduce((d, term) => leastCommonMultiple(d, exactOf(term).d), 1n);
	const scaled = terms.map((term) => {
		const value = exactOf(term).mul(ratio(common));
		return value.s * value.n;
	});
	return { scaled, common };
}

/** The coefficient, or for an irrational one the double that stands for it. */
export function exactOf(term: Term): Rational {
	return term.coefficient.exact ?? exactOfDouble(term.coefficient.value);
}

function leastCommonMultiple(a: bigint, b: bigint): bigint {
	return a * ratio(b, a).n;
}

interface Place {
	readonly p: number;
	readonly x: number;
	readonly count: number;
}

/** Runs `visit` for every assignment of outputs to the given inputs; `outputs` is reused. */
function forEachAssignment(places: readonly Place[], visit: (outputs: number[]) => void): void {
	const outputs = places.map(() => 0);
	for (;;) {
		visit(outputs);
		let k = 0;
		while (k < places.length && (outputs[k] ?? 0) + 1 === places[k]?.count) outputs[k++] = 0;
		if (k === places.length) return;
		outputs[k] = (outputs[k] ?? 0) + 1;
	}
}

/** Per term: which places must show which output, and the answering party's own event. */
function layOut(g: Functional, places: readonly Place[], answering: number) {
	const inputs = g.scenario.outputs[answering] ?? [];
	let size = 1;
	const firsts = inputs.map((count) => {
		const first = size;
		size += count;
		return first;
	});
	const terms = g.terms.map(({ events }) => {
		const own = events.find(([p]) => p === answering);
		return {
			cell: own ? (firsts[own[1]] ?? 0) + own[2] : 0,
			needed: events
				.filter(([p]) => p !== answering)
				.map(([p, x, a]) => [places.findIndex((q) => q.p === p && q.x === x), a] as const)
		};
	});
	return { terms, size, ranges: inputs.map((count, x) => [firsts[x] ?? 0, count] as const) };
}

/** Sums stay below 2^53 in absolute value, so doubles are exact. */
function enumerateInDoubles(
	g: Functional,
	coefficients: readonly bigint[],
	places: readonly Place[],
	answering: number
): number {
	const { terms, size, ranges } = layOut(g, places, answering);
	const weights = coefficients.map(Number);
	let most = -Infinity;
	forEachAssignment(places, (outputs) => {
		const cells = new Array<number>(size).fill(0);
		terms.forEach(({ cell, needed }, t) => {
			if (needed.every(([place, a]) => outputs[place] === a))
				cells[cell] = (cells[cell] ?? 0) + (weights[t] ?? 0);
		});
		let value = cells[0] ?? 0;
		for (const [first, count] of ranges) value += Math.max(...cells.slice(first, first + count));
		if (value > most) most = value;
	});
	return most;
}

function enumerateExactly(
	g: Functional,
	coefficients: readonly bigint[],
	places: readonly Place[],
	answering: number
): bigint {
	const layout = layOut(g, places, answering);
	let most: bigint | null = null;
	forEachAssignment(places, (outputs) => {
		const cells = cellsAt(layout, coefficients, outputs);
		let value = cells[0] ?? 0n;
		for (const [first, count] of layout.ranges)
			value += cells.slice(first, first + count).reduce((a, b) => (a > b ? a : b));
		if (most === null || value > most) most = value;
	});
	return most ?? 0n;
}

/** What the answering party's outputs are worth, and the constant first. */
function cellsAt(
	{ terms, size }: ReturnType<typeof layOut>,
	coefficients: readonly bigint[],
	outputs: readonly number[]
): bigint[] {
	const cells = new Array<bigint>(size).fill(0n);
	terms.forEach(({ cell, needed }, t) => {
		if (needed.every(([place, a]) => outputs[place] === a))
			cells[cell] = (cells[cell] ?? 0n) + (coefficients[t] ?? 0n);
	});
	return cells;
}
