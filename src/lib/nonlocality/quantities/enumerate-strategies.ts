import { MixedRadixGray } from './mixed-radix-gray';
import type { StrategyTensor, TensorParty } from './strategy-tensor';

/** The best strategy met: `digits[k]` are the outputs of the k-th party of the tensor. */
export interface BestStrategy {
	/** The maximum times the tensor's denominator. */
	readonly value: bigint;
	readonly digits: readonly (readonly number[])[];
}

/** Steps between two calls of `tick`: well below 100 ms of work each. */
const STEPS_PER_TICK = 4096;

/**
 * Maximum over all deterministic strategies: enumerates every party but the last and gives the last
 * its best reply. Fixing the parties one after another contracts the tensor; a Gray code changes
 * one output at a time, so that each step costs one row. Exact: all entries are integers and all
 * sums stay below 2^53 (`fitsDoubles`), or are BigInt.
 */
export function enumerateStrategies(
	tensor: StrategyTensor,
	tick: (enumerated: number) => void
): BestStrategy {
	const enumeration = tensor.fitsDoubles
		? new DoubleEnumeration(tensor, tick)
		: new BigIntEnumeration(tensor, tick);
	return enumeration.run();
}

abstract class Enumeration {
	protected readonly parties: readonly TensorParty[];
	protected readonly codes: MixedRadixGray[] = [];
	protected best: number[][] = [];
	#steps = 0;

	constructor(
		protected readonly tensor: StrategyTensor,
		private readonly onTick: (enumerated: number) => void
	) {
		this.parties = tensor.parties;
	}

	abstract run(): BestStrategy;

	protected countStep(): void {
		if (++this.#steps % STEPS_PER_TICK === 0) this.onTick(this.#steps);
	}

	/** Output of the Gray code's digit: digit 0 is the last output, whose row is zero. */
	protected keep(reply: number[]): void {
		this.best = this.parties
			.slice(0, -1)
			.map((party, k) =>
				party.outputs.map((count, i) => (count - 1 + (this.codes[k]?.digits[i] ?? 0)) % count)
			);
		this.best.push(reply);
	}

	protected startCode(level: number): MixedRadixGray {
		const code = new MixedRadixGray(this.parties[level]?.outputs ?? []);
		this.codes[level] = code;
		return code;
	}
}

/** Row of an input's digit in a party's coordinates, or -1 for digit 0 (the last output). */
function rowOf(party: TensorParty, input: number, digit: number): number {
	return digit === 0 ? -1 : (party.starts[input] ?? 0) + digit - 1;
}

class DoubleEnumeration extends Enumeration {
	#value = -Infinity;

	run(): BestStrategy {
		const rows = Float64Array.from(this.tensor.entries, Number);
		const [first] = this.parties;
		if (this.parties.length === 1 && first) this.#consider(first, rows);
		else this.#descend(0, rows);
		return { value: BigInt(this.#value), digits: this.best };
	}

	#descend(level: number, rows: Float64Array): void {
		const party = this.parties[level];
		if (!party) return;
		const innermost = level === this.parties.length - 2;
		const last = this.parties[level + 1];
		const width = rows.length / party.size;
		const current = rows.slice(0, width);
		const code = this.startCode(level);
		do {
			if (code.changed >= 0) {
				const old = rowOf(party, code.changed, code.before);
				const now = rowOf(party, code.changed, code.digits[code.changed] ?? 0);
				if (old >= 0) subtractRow(current, rows, old * width);
				if (now >= 0) addRow(current, rows, now * width);
			}
			if (innermost && last) this.#consider(last, current);
			else this.#descend(level + 1, current);
		} while (code.step());
	}

	#consider(last: TensorParty, row: Float64Array): void {
		this.countStep();
		const value = last.binary ? binaryValue(row) : replyValue(row, last.starts, last.size);
		if (value <= this.#value) return;
		this.#value = value;
		this.keep(bestReply(last, (k) => at(row, k)));
	}
}

function addRow(into: Float64Array, rows: Float64Array, offset: number): void {
	for (let k = 0; k < into.length; k++) into[k] = at(into, k) + at(rows, offset + k);
}

function subtractRow(into: Float64Array, rows: Float64Array, offset: number): void {
	for (let k = 0; k < into.length; k++) into[k] = at(into, k) - at(rows, offset + k);
}

/** Value of the best reply when every input has two outputs: one coordinate each. */
function binaryValue(row: Float64Array): number {
	let value = at(row, 0);
	for (let k = 1; k < row.length; k++) {
		const weight = at(row, k);
		value += weight > 0 ? weight : 0;
	}
	return value;
}

/** Per input the largest coordinate, or 0 for the last output. */
function replyValue(row: Float64Array, starts: readonly number[], size: number): number {
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
	#value: bigint | null = null;

	run(): BestStrategy {
		this.#descend(0, [...this.tensor.entries]);
		return { value: this.#value ?? 0n, digits: this.best };
	}

	#descend(level: number, rows: readonly bigint[]): void {
		const party = this.parties[level];
		if (!party) return;
		if (level === this.parties.length - 1) return this.#reply(party, rows);
		const width = rows.length / party.size;
		const current = rows.slice(0, width);
		const code = this.startCode(level);
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
		if (this.#value !== null && value <= this.#value) return;
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
