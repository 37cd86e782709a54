import type { Problem } from '../lib/nonlocality';

/** Budgets of the other quantities, in seconds. */
export interface StationBudget {
	readonly each: number;
	readonly quantum: number;
}

/** Enough for a diagnosis, small beside the claim's own. */
export const STATION_BUDGET: StationBudget = { each: 5, quantum: 10 };
const STARTS = 12;

/** The other quantities of the claimed functional that a disagreement is compared with. */
export function claimStations(claimed: Problem, budget = STATION_BUDGET): Problem[] {
	if (claimed.quantity === 'value') return [];
	const { format, outputs, terms, sense, constraints, seed } = claimed;
	const base = { format, outputs, terms, sense, constraints, seed, seconds: budget.each };
	const twoParties = outputs.length === 2;
	const npa = { ...base, quantity: 'npa' } as const;
	const seeSaw = { ...base, quantity: 'see-saw', starts: STARTS } as const;
	const inDimension = (d: number) => outputs.map(() => d);
	const largest = Math.max(...outputs.flat());
	const stations: Problem[] = [
		{ ...base, quantity: 'local' },
		{ ...base, quantity: 'no-signalling' },
		{ ...npa, level: 1, nonNegative: false },
		{ ...npa, level: 1, nonNegative: true },
		{ ...npa, level: twoParties ? '1+AB' : { perParty: 1 }, nonNegative: false },
		{ ...npa, level: 2, nonNegative: false },
		{ ...seeSaw, dimension: inDimension(2), state: 'free' }
	];
	if (twoParties)
		stations.push({ ...seeSaw, dimension: inDimension(largest), state: 'maximally-entangled' });
	if (constraints.length === 0)
		stations.push({
			...base,
			seconds: budget.quantum,
			quantity: 'quantum',
			levels: null,
			dimensions: null,
			gap: 1e-8
		});
	return stations;
}
