/**
 * Check of a deterministic strategy: its value is recomputed from the terms, exactly. The upper
 * side is proved by plain enumeration, from scratch for every strategy, while that is cheap.
 */
import {
	ZERO,
	exactOfDouble,
	parseRational,
	printRational,
	ratio,
	toDoubleDown,
	toDoubleUp,
	type Rational
} from '../exact/rational';
import type { Functional, Term } from '../scenario/functional';
import type { CheckOutcome, DeterministicCertificate } from './types';

/** Terms looked at in all (strategies times terms): about a second in doubles, in BigInt. */
const DOUBLE_WORK_LIMIT = 2 ** 26;
const BIGINT_WORK_LIMIT = 2 ** 22;

/** Proves `lower` (and, by enumeration of a small problem, `upper`) of the local maximum of g. */
export function checkDeterministicStrategy(
	g: Functional,
	certificate: DeterministicCertificate
): CheckOutcome {
	const defect = strategyDefect(g, certificate.strategy);
	if (defect) return { checked: false, reason: defect };
	const { strategy } = certificate;
	let value = ZERO;
	for (const term of g.terms) {
		if (term.events.every(([p, x, a]) => strategy[p]?.[x] === a)) value = value.add(exactOf(term));
	}
	const allowance = allowanceOf(g);
	const rational = g.terms.every((term) => term.coefficient.exact);
	if (certificate.value !== null) {
		const stated = parseRational(certificate.value);
		if (!rational || !stated?.equals(value))
			return {
				checked: false,
				reason: `the strategy's value is ${printRational(value)}, not ${certificate.value}`
			};
	}
	const maximum = enumerateAgain(g);
	if (maximum !== null && maximum.compare(value) > 0 && rational)
		return {
			checked: false,
			reason: `another strategy reaches ${printRational(maximum)}, more than ${printRational(value)}`
		};
	return {
		checked: true,
		lower: toDoubleDown(value.sub(allowance)),
		upper: maximum === null ? null : toDoubleUp(maximum.add(allowance)),
		exact: rational && maximum !== null ? printRational(value) : null,
		method:
			maximum === null
				? 'value of the strategy recomputed; only the lower side is checked, the enumeration is too large to repeat here'
				: 'value of the strategy recomputed, all strategies enumerated again'
	};
}

function strategyDefect(g: Functional, strategy: readonly (readonly number[])[]): string | null {
	const { outputs } = g.scenario;
	if (!Array.isArray(strategy) || strategy.length !== outputs.length)
		return `the strategy is not for ${outputs.length} parties`;
	for (const [p, counts] of outputs.entries()) {
		if (strategy[p]?.length !== counts.length)
			return `the strategy of party ${p} does not answer its ${counts.length} inputs`;
		for (const [x, count] of counts.entries()) {
			const output = strategy[p]?.[x] ?? -1;
			if (!Number.isInteger(output) || output < 0 || output >= count)
				return `the strategy of party ${p} answers input ${x} with no output of it`;
		}
	}
	return null;
}

function exactOf(term: Term): Rational {
	return term.coefficient.exact ?? exactOfDouble(term.coefficient.value);
}

/** What the true value may differ by on any behaviour: every probability is at most 1. */
function allowanceOf(g: Functional): Rational {
	return g.terms.reduce(
		(sum, { coefficient: c }) => (c.exact ? sum : sum.add(exactOfDouble(c.error))),
		ZERO
	);
}

/** The maximum over all strategies, or null when that takes too long here. */
function enumerateAgain(g: Functional): Rational | null {
	const { outputs } = g.scenario;
	const counts = outputs.map((row) => row.reduce((product, count) => product * count, 1));
	const answering = counts.indexOf(Math.max(...counts));
	const others = outputs.flatMap((row, p) =>
		p === answering ? [] : row.map((count, x) => ({ p, x, count }))
	);
	const work = others.reduce((product, { count }) => product * count, g.terms.length);
	if (work > DOUBLE_WORK_LIMIT) return null;

	const common = g.terms.reduce((d, term) => leastCommonMultiple(d, exactOf(term).d), 1n);
	const scaled = g.terms.map((term) => {
		const value = exactOf(term).mul(ratio(common));
		return value.s * value.n;
	});
	const sum = scaled.reduce((total, c) => total + (c < 0n ? -c : c), 0n);
	if (sum >= 2n ** 53n) {
		if (work > BIGINT_WORK_LIMIT) return null;
		return ratio(enumerateExactly(g, scaled, others, answering), common);
	}
	return ratio(BigInt(enumerateInDoubles(g, scaled, others, answering)), common);
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
	const { terms, size, ranges } = layOut(g, places, answering);
	let most: bigint | null = null;
	forEachAssignment(places, (outputs) => {
		const cells = new Array<bigint>(size).fill(0n);
		terms.forEach(({ cell, needed }, t) => {
			if (needed.every(([place, a]) => outputs[place] === a))
				cells[cell] = (cells[cell] ?? 0n) + (coefficients[t] ?? 0n);
		});
		let value = cells[0] ?? 0n;
		for (const [first, count] of ranges)
			value += cells.slice(first, first + count).reduce((a, b) => (a > b ? a : b));
		if (most === null || value > most) most = value;
	});
	return most ?? 0n;
}
