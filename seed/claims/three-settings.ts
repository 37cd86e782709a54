import { family, type SeedClaim } from './seed-claim';

export const THREE_SETTING_CLAIMS: readonly SeedClaim[] = [
	// Settled by a strategy grown to large local dimension
	{
		key: 'i3322-quantum',
		paper: 'lindmark2011',
		by: 'member',
		input: {
			...family('i3322'),
			quantity: 'quantum',
			printed: '0.2509',
			method: 'See-saw in large dimension',
			locator: 'Table II, row 3'
		}
	},
	// Consistent, not settled: the printed digits ask for more than the enclosure gives
	{
		key: 'i3322-more-digits',
		paper: 'novik2019',
		by: 'member',
		input: {
			...family('i3322'),
			quantity: 'quantum',
			printed: '0.250875',
			method: 'See-saw in large dimension',
			locator: 'p. 13'
		}
	},
	// Another quantity: the level the stated method would give
	{
		key: 'i3322-level-taken-for-quantum',
		paper: 'lindmark2011',
		by: 'member',
		input: {
			...family('i3322'),
			quantity: 'quantum',
			printed: '0.2515',
			method: 'NPA level 1+AB',
			locator: 'Table II, row 4'
		}
	},
	{
		key: 'i3322-almost-quantum',
		paper: 'lindmark2011',
		by: 'maintainer',
		input: {
			...family('i3322'),
			quantity: 'almost-quantum',
			printed: '0.2515',
			method: 'NPA level 1+AB',
			locator: 'Table II, row 5'
		},
		then: 'publish'
	},
	// Another quantity: level 1 with non-negative probabilities imposed
	{
		key: 'i3322-level-1',
		paper: 'osk2015',
		by: 'maintainer',
		input: {
			...family('i3322'),
			quantity: 'npa',
			level: '1',
			printed: '0.3660',
			method: 'NPA level 1',
			locator: 'Fig. 2'
		}
	},
	// Lower side only: a value in fixed dimension
	{
		key: 'i3322-qubits',
		paper: 'lindmark2011',
		by: 'member',
		input: {
			...family('i3322'),
			quantity: 'quantum-dimension',
			dimension: '2',
			relation: '>=',
			printed: '0.25',
			method: 'See-saw',
			locator: 'Table II, row 1'
		},
		then: 'publish'
	},
	// Agreement with a level of the hierarchy
	{
		key: 'i3322-level-3',
		paper: 'osk2015',
		by: 'member',
		input: {
			...family('i3322'),
			quantity: 'npa',
			level: '3',
			printed: '0.250876',
			method: 'NPA level 3',
			locator: 'Fig. 3'
		}
	},
	// Open: past the solver's limit, and the other levels do not settle it
	{
		key: 'i3322-level-5',
		paper: 'novik2019',
		by: 'maintainer',
		input: {
			...family('i3322'),
			quantity: 'npa',
			level: '5',
			printed: '0.2508754',
			method: 'NPA level 5',
			locator: 'Table IV'
		}
	}
];
