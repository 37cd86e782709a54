import { MixedRadixGray } from './mixed-radix-gray';
import type { StrategyTensor, TensorParty } from './strategy-tensor';

/** The best strategy met: `digits[k]` are the outputs of the k-th party of the tensor. */
export interface BestStrategy {
	/** The maximum times the tensor's denominator. */
	readonly value: bigint;
	readonly digits: readonly (readonly number[])[];
}

/** Strategies that reach a value: any choice of the outputs listed by party and input. */
export type OutputChoices = readonly (readonly (readonly number[])[])[];

/** Called now and then with the strategies enumerated and a look at the best one so far. */
export type EnumerationTick = (enumerated: number, best: () => BestStrategy) => void;

/** Steps between two calls of `tick`: well below 100 ms of work each. */
const STEPS_PER_TICK = 4096;

/**
 * Maximum over all deterministic strategies: enumerates every party but the last and gives the last
 * its best reply. Fixing the parties one after another contracts the tensor; a Gray code changes
 * one output at a time, so that each step costs one row. Exact: all entries are integers and all
 * sums stay below 2^53 (`fitsDoubles`), or are BigInt.
 */
export function enumerateStrategies(tensor: StrategyTensor, tick: EnumerationTick): BestStrategy {
	return enumerationOf(tensor, tick).run();
}

/** Visits all strategies of the given value: the maximum, so that they are best replies. */
export function forEachBestStrategy(
	tensor: StrategyTensor,
	maximum: bigint,
	tick: EnumerationTick,
	visit: (choices: OutputChoices) => void
): void {
	enumerationOf(tensor, tick, { maximum, visit }).run();
}

interface Ties {
	readonly maximum: bigint;
	readonly visit: (choices: OutputChoices) => void;
}

function enumerationOf(tensor: StrategyTensor, tick: EnumerationTick, ties: Ties | null = null) {
	return tensor.fitsDoubles
		? new DoubleEnumeration(tensor, tick, ties)
		: new BigIntEnumeration(tensor, tick, ties);
}

abstract class Enumeration {
	protected readonly parties: readonly TensorParty[];
	protected readonly codes: MixedRadixGray[] = [];
	protected best: number[][] = [];
	#steps = 0;

	constructor(
		protected readonly tensor: StrategyTensor,
		private readonly onTick: EnumerationTick,
		protected readonly ties: Ties | null
	) {
		this.parties = tensor.parties;
	}

	run(): BestStrategy {
		this.start();
		return this.found();
	}

	protected abstract start(): void;
	protected abstract found(): BestStrategy;

	protected countStep(): void {
		if (++this.#steps % STEPS_PER_TICK === 0) this.onTick(this.#steps, () => this.found());
	}

	/** Output of the Gray code's digit: digit 0 is the last output, whose row is zero. */
	#outputs(): number[][] {
		return this.parties
			.slice(0, -1)
			.map((party, k) =>
				party.outputs.map((count, i) => (count - 1 + (this.codes[k]?.digits[i] ?? 0)) % count)
			);
	}

	protected keep(reply: number[]): void {
		this.best = [...this.#outputs(), reply];
	}

	protected visitTies(last: TensorParty, entry: (k: number) => number | bigint): void {
		const fixed = this.#outputs().map((outputs) => outputs.map((output) => [output]));
		this.ties?.visit([...fixed, bestReplies(last, entry)]);
	}

	protected startCode(level: number, outputs: readonly number[]): MixedRadixGray {
		const code = new MixedRadixGray(outputs);
		this.codes[level] = code;
		return code;
	}
}

/** Row of an input's digit in a party's coordinates, or -1 for digit 0 (the last output). */
function rowOf(party: TensorParty, input: number, digit: number): number {
	return digit === 0 ? -1 : (party.starts[input] ?? 0) + digit - 1;
}

class DoubleEnumeration extends Enumeration {
	#value = this.ties ? Number(this.ties.maximum) : -Infinity;

	protected found(): BestStrategy {
		return { value: BigInt(this.#value), digits: this.best };
	}

	protected start(): void {
		const rows = Float64Array.from(this.tensor.entries, Number);
		const [first] = this.parties;
		if (this.parties.length === 1 && first) this.#consider(first, rows, valueOf(first, rows));
		else this.#descend(0, rows);
	}

	#descend(level: number, rows: Float64Array): void {
		const party = this.parties[level];
		if (!party) return;
		const last = level === this.parties.length - 2 ? this.parties[level + 1] : undefined;
		const width = rows.length / party.size;
		const current = rows.slice(0, width);
		const sums = last?.binary ? rowSums(rows, width) : null;
		let sum = sums ? at(sums, 0) : 0;
		const code = this.startCode(level, party.outputs);
		do {
			let modulus = 0;
			if (code.changed >= 0) {
				const old = rowOf(party, code.changed, code.before);
				const now = rowOf(party, code.changed, code.digits[code.changed] ?? 0);
				if (old >= 0) modulus = addRow(current, rows, old * width, -1);
				if (now >= 0) modulus = addRow(current, rows, now * width, 1);
				if (sums) sum += (now < 0 ? 0 : at(sums, now)) - (old < 0 ? 0 : at(sums, old));
			} else if (sums) modulus = addRow(current, rows, 0, 0);
			if (!last) this.#descend(level + 1, current);
			// Two outputs each: entry 0 plus the positive others, max(0, c) = (c + |c|) / 2.
			else if (sums) this.#consider(last, current, at(current, 0) + (sum + modulus) / 2);
			else this.#consider(last, current, valueOf(last, current));
		} while (code.step());
	}

	#consider(last: TensorParty, row: Float64Array, value: number): void {
		this.countStep();
		if (value < this.#value) return;
		if (this.ties) return this.visitTies(last, (k) => at(row, k));
		if (value === this.#value) return;
		this.#value = value;
		this.keep(bestReply(last, (k) => at(row, k)));
	}
}

/** Of every row, the sum of its entries but the first. */
function rowSums(rows: Float64Array, width: number): Float64Array {
	const sums = new Float64Array(rows.length / width);
	for (let r = 0; r < sums.length; r++)
		for (let k = 1; k < width; k++) sums[r] = at(sums, r) + at(rows, r * width + k);
	return sums;
}

/**
 * Adds sign times a row, and returns the sum of the moduli of all entries but the first. Four sums
 * side by side do not wait for one another; integers, so that the order plays no part.
 */
function addRow(into: Float64Array, rows: Float64Array, offset: number, sign: number): number {
	const width = into.length;
	into[0] = at(into, 0) + sign * at(rows, offset);
	let [a, b, c, d] = [0, 0, 0, 0];
	let k = 1;
	for (; k + 3 < width; k += 4) {
		const p = at(into, k) + sign * at(rows, offset + k);
		const q = at(into, k + 1) + sign * at(rows, offset + k + 1);
		const r = at(into, k + 2) + sign * at(rows, offset + k + 2);
		const s = at(into, k + 3) + sign * at(rows, offset + k + 3);
		into[k] = p;
		into[k + 1] = q;
		into[k + 2] = r;
		into[k + 3] = s;
		a += Math.abs(p);
		b += Math.abs(q);
		c += Math.abs(r);
		d += Math.abs(s);
	}
	for (; k < width; k++) {
		const p = at(into, k) + sign * at(rows, offset + k);
		into[k] = p;
		a += Math.abs(p);
	}
	return a + b + (c + d);
}

/** Value of the best reply: per input the largest coordinate, or 0 for the last output. */
function valueOf({ starts, size }: TensorParty, row: Float64Array): number {
	let value = at(row, 0);
	for (let i = 0; i < starts.length; i++) {
		const end = starts[i + 1] ?? size;
		let most = 0;
		for (let k = starts[i] ?? 0; k < end; k++) if (at(row, k) > most) most = at(row, k);
		value += most;
	}
	return value;
}

/** The same for integers beyond 2^53. */
class BigIntEnumeration extends Enumeration {
	#value: bigint | null = this.ties?.maximum ?? null;

	protected found(): BestStrategy {
		return { value: this.#value ?? 0n, digits: this.best };
	}

	protected start(): void {
		this.#descend(0, [...this.tensor.entries]);
	}

	#descend(level: number, rows: readonly bigint[]): void {
		const party = this.parties[level];
		if (!party) return;
		if (level === this.parties.length - 1) return this.#reply(party, rows);
		const width = rows.length / party.size;
		const current = rows.slice(0, width);
		const code = this.startCode(level, party.outputs);
		do {
			if (code.changed >= 0) {
				const old = rowOf(party, code.changed, code.before) * width;
				const now = rowOf(party, code.changed, code.digits[code.changed] ?? 0) * width;
				for (let k = 0; k < width; k++) {
					let sum = current[k] ?? 0n;
					if (old >= 0) sum -= rows[old + k] ?? 0n;
					if (now >= 0) sum += rows[now + k] ?? 0n;
					current[k] = sum;
				}
			}
			this.#descend(level + 1, current);
		} while (code.step());
	}

	#reply(party: TensorParty, row: readonly bigint[]): void {
		this.countStep();
		const reply = bestReply(party, (k) => row[k] ?? 0n);
		let value = row[0] ?? 0n;
		reply.forEach((output, i) => {
			if (output < (party.outputs[i] ?? 2) - 1) value += row[(party.starts[i] ?? 0) + output] ?? 0n;
		});
		if (this.#value !== null && value < this.#value) return;
		if (this.ties) return this.visitTies(party, (k) => row[k] ?? 0n);
		if (value === this.#value) return;
		this.#value = value;
		this.keep(reply);
	}
}

function at(row: Float64Array, index: number): number {
	return row[index] as number; // always within the row; `?? 0` would cost a branch per entry
}

/** The best output for every input; the last one (coefficient 0) unless another is better. */
function bestReply(party: TensorParty, entry: (k: number) => number | bigint): number[] {
	return party.outputs.map((count, i) => {
		let output = count - 1;
		let most: number | bigint = 0;
		for (let a = 0; a < count - 1; a++) {
			const value = entry((party.starts[i] ?? 0) + a);
			if (value > most) [output, most] = [a, value];
		}
		return output;
	});
}

/** All best outputs for every input. */
function bestReplies(party: TensorParty, entry: (k: number) => number | bigint): number[][] {
	const best = bestReply(party, entry);
	return party.outputs.map((count, i) => {
		const value = (a: number) => (a < count - 1 ? entry((party.starts[i] ?? 0) + a) : 0);
		const most = value(best[i] ?? 0);
		// 0 and 0n are one number here: neither is above the other
		return Array.from({ length: count }, (_, a) => a).filter((a) => value(a) >= most);
	});
}
