/** Milliseconds of one row; NaN where something was not run. */
export interface RowTimes {
	readonly wasm: number;
	readonly cold: number;
	readonly warm: number;
	readonly csdp: number;
	readonly csdpStart: number;
}

export type RatioName = 'plain' | 'plain without start' | 'cold' | 'warm';
export type Ratios = Partial<Record<RatioName, number>>;

/**
 * Where csdp takes less than this beside its start, the difference of two process times says
 * nothing.
 */
const LEAST_DIFFERENCE = 2;

/** Ours over csdp's, the whole process unless the name says otherwise. */
export function ratiosOf({ wasm, cold, warm, csdp, csdpStart }: RowTimes): Ratios {
	const difference = csdp - csdpStart;
	const all: Record<RatioName, number> = {
		plain: wasm / csdp,
		'plain without start': difference >= LEAST_DIFFERENCE ? wasm / difference : NaN,
		cold: cold / csdp,
		warm: warm / csdp
	};
	return Object.fromEntries(
		Object.entries(all)
			.filter(([, ratio]) => Number.isFinite(ratio))
			.map(([name, ratio]) => [name, Number(ratio.toPrecision(3))])
	);
}
