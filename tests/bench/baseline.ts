import type { RatioName, Ratios } from './ratios';

/** Ratios by the row's name, as committed. */
export type Baseline = Readonly<Record<string, Ratios>>;

/** A ratio may grow by this factor before it is a regression. */
export const TOLERATED_GROWTH = 1.3;

export interface Regression {
	readonly row: string;
	readonly ratio: RatioName;
	readonly before: number;
	readonly now: number;
}

/**
 * Ratios that grew by more than TOLERATED_GROWTH. Rows and ratios that only one side has are left
 * out: a subset may be measured, and drawn instances have no past.
 */
export function findRegressions(baseline: Baseline, measured: Baseline): Regression[] {
	return Object.entries(measured).flatMap(([row, ratios]) =>
		Object.entries(ratios).flatMap(([name, now]): Regression[] => {
			const ratio = name as RatioName;
			const before = baseline[row]?.[ratio];
			if (before === undefined || now <= TOLERATED_GROWTH * before) return [];
			return [{ row, ratio, before, now }];
		})
	);
}

/** Rows of the baseline that were not measured, of those whose name has `only` in it. */
export function unmeasuredRows(baseline: Baseline, measured: Baseline, only = ''): string[] {
	return Object.keys(baseline).filter((row) => row.includes(only) && !(row in measured));
}

export function printRegression({ row, ratio, before, now }: Regression): string {
	const percent = Math.round(100 * (now / before - 1));
	return `${row}: ${ratio} / csdp was ${before}, is ${now} (+${percent} %)`;
}
