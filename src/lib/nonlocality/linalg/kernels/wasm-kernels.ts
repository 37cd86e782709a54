import type { KernelDemand, Kernels } from './kernels';
import type { Supports } from './supports';
import { KERNELS_WASM } from './wasm-binary';

/** Exports of assembly/index.ts; every number but a length or a factor is a byte offset. */
interface Exports {
	dot(a: number, b: number, length: number): number;
	addScaled(a: number, factor: number, b: number, length: number): void;
	multiply(a: number, b: number, c: number, n: number): void;
	symmetrise(a: number, n: number): void;
	mirror(a: number, n: number, upwards: boolean): void;
	factorPanel(a: number, n: number, start: number, end: number, pack: number): number;
	packColumns(a: number, n: number, start: number, end: number, first: number, pack: number): void;
	updateColumns(
		a: number,
		n: number,
		first: number,
		width: number,
		fromGroup: number,
		toGroup: number,
		pack: number
	): void;
	solveFactored(l: number, n: number, b: number): void;
	invertFactor(l: number, n: number, inverse: number): void;
	inverseFromFactor(inverse: number, n: number, result: number): void;
	subtractProduct(matrix: number, diagonal: number, x: number, rest: number, n: number): void;
	largestStep(inverse: number, direction: number, scratch: number, n: number): number;
	buildRows(...offsetsAndSizes: number[]): void;
}

/** Below it lies the scratch of assembly/layout.ts. */
const FIRST_BYTE = 10240;
const PAGE = 65536;
/** Columns eliminated together, so that the rest of a large matrix is walked through seldom ... */
const PANEL = 128;
/** ... whereas a matrix of up to so many columns stays in the cache. */
const ONE_PANEL = 256;
/** Groups of four columns updated together: their packed rows stay in the cache. */
const GROUPS = 16;
/** Multiplications between two polls; about two milliseconds. */
const WORK_PER_POLL = 4e6;
/** A memory of up to so many bytes is kept for the next solve of this thread. */
const KEPT_BYTES = 2 ** 25;

let compiled: WebAssembly.Module | null | undefined;
let idle: WasmKernels | null = null;

/** Null where WebAssembly or its vector instructions are missing. */
function compileOnce(): WebAssembly.Module | null {
	if (compiled === undefined) {
		const bytes = Uint8Array.from(atob(KERNELS_WASM), (character) => character.charCodeAt(0));
		const usable = typeof WebAssembly === 'object' && WebAssembly.validate(bytes);
		compiled = usable ? new WebAssembly.Module(bytes) : null;
	}
	return compiled;
}

/** Kernels with a memory that holds what is asked for; null where they cannot run. */
export function takeWasmKernels(demand: KernelDemand): Kernels | null {
	const module = compileOnce();
	if (!module) return null;
	const width = demand.order <= ONE_PANEL ? demand.order : PANEL;
	const packed = 8 * (demand.order + 8) * width;
	const bytes = FIRST_BYTE + packed + 8 * demand.doubles + 16 * (demand.arrays + 2);
	const kept = idle;
	idle = null;
	const kernels = kept && kept.bytes >= bytes ? kept : new WasmKernels(module, bytes);
	kernels.begin(packed / 8);
	return kernels;
}

function keep(kernels: WasmKernels): void {
	if (kernels.bytes <= KEPT_BYTES && kernels.bytes >= (idle?.bytes ?? 0)) idle = kernels;
}

class WasmKernels implements Kernels {
	readonly kind = 'wasm';
	readonly bytes: number;
	readonly #buffer: ArrayBuffer;
	readonly #all: Uint8Array;
	readonly #call: Exports;
	#next = FIRST_BYTE;
	/** Bytes from here on were never given out: still zero. */
	#untouched = FIRST_BYTE;
	#pack = FIRST_BYTE;

	constructor(module: WebAssembly.Module, bytes: number) {
		const initial = Math.ceil(bytes / PAGE);
		const memory = new WebAssembly.Memory({ initial, maximum: initial });
		const instance = new WebAssembly.Instance(module, { env: { memory } });
		this.bytes = initial * PAGE;
		this.#buffer = memory.buffer;
		this.#all = new Uint8Array(this.#buffer);
		this.#call = instance.exports as unknown as Exports;
	}

	begin(packed: number): void {
		this.#next = FIRST_BYTE;
		this.#pack = this.#take(8 * packed);
	}

	doubles(length: number): Float64Array {
		return new Float64Array(this.#buffer, this.#take(8 * length), length);
	}

	integers(length: number): Int32Array {
		return new Int32Array(this.#buffer, this.#take(4 * length), length);
	}

	#take(bytes: number): number {
		const from = this.#next;
		const end = from + Math.ceil(bytes / 16) * 16;
		if (end > this.bytes)
			throw new Error(
				`the kernels were promised ${this.bytes} bytes at most, ${end} are asked for`
			);
		if (from < this.#untouched) this.#all.fill(0, from, Math.min(end, this.#untouched));
		this.#untouched = Math.max(this.#untouched, end);
		this.#next = end;
		return from;
	}

	release(): void {
		keep(this);
	}

	/** Byte offset of an array that lies in the memory. */
	#at(array: Float64Array | Int32Array): number {
		if (array.buffer !== this.#buffer) throw new Error('the array is not one of these kernels');
		return array.byteOffset;
	}

	dot(a: Float64Array, b: Float64Array): number {
		return this.#call.dot(this.#at(a), this.#at(b), a.length);
	}

	addScaled(a: Float64Array, factor: number, b: Float64Array): void {
		this.#call.addScaled(this.#at(a), factor, this.#at(b), a.length);
	}

	multiply(a: Float64Array, b: Float64Array, c: Float64Array, n: number): void {
		this.#call.multiply(this.#at(a), this.#at(b), this.#at(c), n);
	}

	symmetrise(a: Float64Array, n: number): void {
		this.#call.symmetrise(this.#at(a), n);
	}

	mirror(a: Float64Array, n: number, to: 'upper' | 'lower'): void {
		this.#call.mirror(this.#at(a), n, to === 'upper');
	}

	factorCholesky(a: Float64Array, n: number, poll?: () => void): boolean {
		const call = this.#call;
		const at = this.#at(a);
		const pack = this.#pack;
		const panel = n <= ONE_PANEL ? n : PANEL;
		for (let start = 0; start < n; start += panel) {
			const end = Math.min(start + panel, n);
			if (!call.factorPanel(at, n, start, end, pack)) return false;
			if (end === n) break;
			poll?.();
			call.packColumns(at, n, start, end, end, pack);
			const groups = Math.ceil((n - end) / 4);
			let work = 0;
			for (let group = 0; group < groups; group += GROUPS) {
				const last = Math.min(group + GROUPS, groups);
				call.updateColumns(at, n, end, end - start, group, last, pack);
				work += 16 * (groups - group) * (last - group) * panel;
				if (work < WORK_PER_POLL) continue;
				work = 0;
				poll?.();
			}
		}
		return true;
	}

	solveFactored(l: Float64Array, n: number, b: Float64Array): void {
		this.#call.solveFactored(this.#at(l), n, this.#at(b));
	}

	invertFactor(l: Float64Array, n: number, inverse: Float64Array): void {
		this.#call.invertFactor(this.#at(l), n, this.#at(inverse));
	}

	inverseFromFactor(inverse: Float64Array, n: number, result: Float64Array): void {
		this.#call.inverseFromFactor(this.#at(inverse), n, this.#at(result));
	}

	subtractProduct(
		matrix: Float64Array,
		diagonal: Float64Array,
		x: Float64Array,
		rest: Float64Array,
		n: number
	): void {
		this.#call.subtractProduct(
			this.#at(matrix),
			this.#at(diagonal),
			this.#at(x),
			this.#at(rest),
			n
		);
	}

	largestStep(
		inverse: Float64Array,
		direction: Float64Array,
		scratch: Float64Array,
		n: number
	): number {
		return this.#call.largestStep(this.#at(inverse), this.#at(direction), this.#at(scratch), n);
	}

	buildSchur(
		supports: Supports,
		x: Float64Array,
		w: Float64Array,
		matrix: Float64Array,
		poll: () => void
	): void {
		const { size, stride, mostRows, rowStart } = supports;
		const m = supports.order.length;
		const mark = this.#next;
		const left = this.#take(8 * mostRows * stride);
		const right = this.#take(8 * mostRows * stride);
		const product = this.#take(8 * stride * stride);
		const lists = [
			this.#at(rowStart),
			this.#at(supports.rows),
			this.#at(supports.columnStart),
			this.#at(supports.columns),
			this.#at(supports.cellStart),
			this.#at(supports.cells),
			left,
			right,
			product,
			this.#at(matrix),
			m
		] as const;
		const depth = Math.max(1, (rowStart[m] ?? 0) / Math.max(1, m));
		const ranks = Math.max(1, Math.ceil(WORK_PER_POLL / (stride * stride * depth)));
		for (let rank = 0; rank < m; rank += ranks) {
			const last = Math.min(rank + ranks, m);
			this.#call.buildRows(this.#at(x), this.#at(w), size, stride, rank, last, ...lists);
			poll();
		}
		this.#next = mark;
	}
}
