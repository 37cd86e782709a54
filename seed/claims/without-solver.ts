import { described, family, type SeedClaim } from './seed-claim';

export const CLAIMS_WITHOUT_SOLVER: readonly SeedClaim[] = [
	// Open: no solver for the quantity (two of them with the caution)
	{
		key: 'threshold',
		paper: 'tarrow2010',
		by: 'member',
		input: {
			...described('Isotropic box, d = 2, one bit sent'),
			quantity: 'information-causality',
			printed: '0.78',
			method: 'Analytic',
			locator: 'p. 3'
		}
	},
	{
		key: 'efficiency',
		paper: 'halden1998',
		by: 'member',
		input: {
			...family('chsh'),
			quantity: 'efficiency',
			printed: '82.8 %',
			method: 'Analytic',
			locator: 'Fig. 2'
		}
	},
	{
		key: 'key-rate',
		paper: 'novik2019',
		by: 'maintainer',
		input: {
			...family('chsh'),
			quantity: 'key-rate',
			relation: '>=',
			printed: '0.437',
			method: 'Analytic',
			locator: 'Thm 2'
		}
	}
];
