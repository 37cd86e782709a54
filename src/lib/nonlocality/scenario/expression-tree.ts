import type { Coefficient } from '../exact/coefficient';

/** An input as it was written: before the index base is known. */
export interface WrittenInput {
	readonly party: number;
	readonly index: number;
	readonly position: number;
}

/** One item of P(...): an output of a written input. */
export interface WrittenEvent extends WrittenInput {
	readonly output: number;
}

/** What an expression says, before inputs are counted from 0. Sums and products are flat lists. */
export type Node = { readonly position: number } & (
	| { readonly kind: 'number'; readonly value: Coefficient }
	| {
			readonly kind: 'sum';
			readonly items: readonly { readonly node: Node; readonly sign: 1 | -1 }[];
	  }
	| {
			readonly kind: 'product';
			readonly items: readonly { readonly node: Node; readonly divides: boolean }[];
	  }
	| { readonly kind: 'power'; readonly base: Node; readonly exponent: Node }
	| { readonly kind: 'function'; readonly name: string; readonly argument: Node }
	/** <product of observables>; `everyone`: written without party names, as E(0,1). */
	| {
			readonly kind: 'correlator';
			readonly inputs: readonly WrittenInput[];
			readonly everyone: boolean;
	  }
	/** P(outputs | inputs); `everyone` as above. */
	| {
			readonly kind: 'probability';
			readonly events: readonly WrittenEvent[];
			readonly everyone: boolean;
	  }
);

export const PARTY_LETTERS = 'ABCDEF';
