import { expression, family, type SeedClaim } from './seed-claim';

/** The Clauser-Horne form, rows party 0. */
const CH_TABLE = '0 -1 0\n-1 1 1\n0 1 -1';

export const CHSH_CLAIMS: readonly SeedClaim[] = [
	// Agreement, in several readings
	{
		key: 'chsh-quantum',
		paper: 'arlen2004',
		by: 'member',
		input: {
			...family('chsh'),
			quantity: 'quantum',
			printed: '2.8284',
			method: 'Semidefinite relaxation, level 1',
			locator: 'eq. (7)'
		},
		then: 'publish'
	},
	{
		key: 'chsh-local',
		paper: 'arlen2004',
		by: 'member',
		input: {
			...family('chsh'),
			quantity: 'local',
			printed: '2',
			method: 'Enumeration',
			locator: 'eq. (2)'
		},
		then: 'publish'
	},
	{
		key: 'chsh-no-signalling',
		paper: 'arlen2004',
		by: 'owner',
		input: { ...family('chsh'), quantity: 'no-signalling', printed: '4', locator: 'p. 3' },
		then: 'publish'
	},
	// The same inequality with indices from 1, an exact irrational value, an upper bound
	{
		key: 'chsh-at-most',
		paper: 'osk2015',
		by: 'maintainer',
		input: {
			...expression('A1 B1 + A1 B2 + A2 B1 - A2 B2'),
			quantity: 'quantum',
			relation: '<=',
			printed: '2\\sqrt{2}',
			method: 'Operator identity',
			locator: 'Lemma 1'
		},
		then: 'publish'
	},
	// Two papers in different normalisations meet on one page
	{
		key: 'ch-quantum',
		paper: 'quill2017',
		by: 'member',
		input: {
			subjectKind: 'collins-gisin',
			table: CH_TABLE,
			quantity: 'quantum',
			printed: '0.2071',
			locator: 'Table I, row 1'
		},
		then: 'publish'
	},
	// Another normalisation: the value belongs to the correlator form
	{
		key: 'ch-in-correlators',
		paper: 'quill2017',
		by: 'member',
		input: {
			subjectKind: 'collins-gisin',
			table: CH_TABLE,
			quantity: 'quantum',
			printed: '2.8284',
			locator: 'Table I, row 2'
		}
	},
	// Another normalisation: the winning probability of the game
	{
		key: 'chsh-winning',
		paper: 'wexler2021',
		by: 'member',
		input: { ...family('chsh'), quantity: 'quantum', printed: '0.8536', locator: 'Sec. 2' }
	},
	// Differs in the last digits, within usual solver tolerance
	{
		key: 'chsh-solver-tolerance',
		paper: 'lindmark2011',
		by: 'maintainer',
		input: {
			...family('chsh'),
			quantity: 'quantum',
			printed: '2.82842718',
			method: 'Semidefinite relaxation, level 2',
			locator: 'Table I, row 1'
		}
	},
	// Relation reversed
	{
		key: 'chsh-reversed',
		paper: 'halden1998',
		by: 'member',
		input: {
			...family('chsh'),
			quantity: 'quantum',
			relation: '>=',
			printed: '2.9',
			locator: 'p. 78'
		}
	},
	// Another quantity: the maximum, not the minimum
	{
		key: 'chsh-minimum',
		paper: 'halden1998',
		by: 'member',
		input: {
			...family('chsh'),
			quantity: 'quantum',
			sense: 'min',
			printed: '2.8284',
			locator: 'p. 79'
		}
	},
	// An expression of one's own
	{
		key: 'weighted-chsh',
		paper: 'quill2017',
		by: 'member',
		input: {
			...expression('2 A0 B0 + A0 B1 + A1 B0 - A1 B1'),
			quantity: 'local',
			printed: '3',
			locator: 'eq. (19)'
		}
	},
	// Index base: the paper counts inputs from 1, the entry from 0
	{
		key: 'agreements-index-base',
		paper: 'quill2017',
		by: 'member',
		input: {
			...expression(
				'P(0,0|1,1) + P(1,1|1,1) + P(0,0|1,2) + P(1,1|1,2) + P(0,0|2,1) + P(1,1|2,1) + P(0,1|2,2) + P(1,0|2,2) + 1',
				'0'
			),
			outputs: '2 2 3 / 2 2 2',
			quantity: 'local',
			sense: 'min',
			printed: '2',
			locator: 'eq. (24)'
		}
	}
];
