import type { ClaimInput } from '../src/lib/schemas/claim-input';
import type { PaperKey } from './papers';
import type { Person } from './people';

export interface SeedClaim {
	/** Names it among the seed's claims. */
	readonly key: string;
	readonly paper: PaperKey;
	readonly by: Person['key'];
	readonly input: Partial<ClaimInput> & Pick<ClaimInput, 'quantity' | 'printed' | 'locator'>;
	/** Done to it after it was entered, by the maintainer. */
	readonly then?: 'publish' | 'propose' | 'withdraw';
	/** Key of the claim that supersedes it. */
	readonly supersededBy?: string;
	/** Left for the running server, so that the demo shows a recomputation under way. */
	readonly leaveQueued?: boolean;
}

const family = (name: string, parameter = '') =>
	({ subjectKind: 'family', family: name, familyParameter: parameter }) as const;
const expression = (text: string, indexBase: ClaimInput['indexBase'] = 'read') =>
	({ subjectKind: 'expression', expression: text, indexBase }) as const;
const described = (text: string) => ({ subjectKind: 'described', described: text }) as const;

const CH_TABLE = '0 -1 0\n-1 1 1\n0 1 -1';

/**
 * What the invented papers claim. The comments say what each is there to show; whether it agrees
 * is decided by running the solvers, never written down here.
 */
export const CLAIMS: readonly SeedClaim[] = [
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
	// Sign
	{
		key: 'elegant-sign',
		paper: 'halden1998',
		by: 'member',
		input: {
			...family('elegant'),
			quantity: 'no-signalling',
			printed: '-12',
			locator: 'p. 81'
		}
	},
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
	{
		key: 'cglmp3-quantum',
		paper: 'ferrante2002',
		by: 'member',
		input: {
			...family('cglmp', '3'),
			quantity: 'quantum',
			printed: '2.9149',
			method: 'Optimised state',
			locator: 'eq. (12)'
		},
		then: 'publish'
	},
	{
		key: 'cglmp3-maximally-entangled',
		paper: 'ferrante2002',
		by: 'member',
		input: {
			...family('cglmp', '3'),
			quantity: 'maximally-entangled',
			dimension: '3',
			relation: '>=',
			printed: '2.8729',
			locator: 'eq. (9)'
		},
		then: 'publish'
	},
	// Another quantity: the maximally entangled state only
	{
		key: 'cglmp3-taken-for-maximum',
		paper: 'wexler2021',
		by: 'maintainer',
		input: {
			...family('cglmp', '3'),
			quantity: 'quantum',
			printed: '2.8729',
			method: 'Maximally entangled state',
			locator: 'Sec. 4'
		}
	},
	{
		key: 'cglmp4-quantum',
		paper: 'ferrante2002',
		by: 'member',
		input: {
			...family('cglmp', '4'),
			quantity: 'quantum',
			printed: '2.9727',
			locator: 'Table III'
		},
		then: 'propose'
	},
	// Truncated instead of rounded
	{
		key: 'cglmp4-truncated',
		paper: 'novik2019',
		by: 'member',
		input: { ...family('cglmp', '4'), quantity: 'quantum', printed: '2.972', locator: 'p. 11' }
	},
	// Two neighbouring digits changed places
	{
		key: 'chained4-swapped',
		paper: 'osk2015',
		by: 'member',
		input: {
			...family('chained', '4'),
			quantity: 'quantum',
			printed: '7.3190',
			method: 'Closed form',
			locator: 'Table I, n = 4'
		}
	},
	// One digit mistyped
	{
		key: 'chained4-mistyped',
		paper: 'novik2019',
		by: 'member',
		input: { ...family('chained', '4'), quantity: 'quantum', printed: '7.8910', locator: 'p. 12' }
	},
	// One digit missing
	{
		key: 'chained3-missing',
		paper: 'osk2015',
		by: 'member',
		input: {
			...family('chained', '3'),
			quantity: 'quantum',
			printed: '5.962',
			locator: 'Table I, n = 3'
		}
	},
	// Superseded by a tighter one
	{
		key: 'chained5-loose',
		paper: 'halden1998',
		by: 'member',
		input: {
			...family('chained', '5'),
			quantity: 'quantum',
			relation: '<=',
			printed: '9.6',
			locator: 'p. 80'
		},
		supersededBy: 'chained5-tight'
	},
	{
		key: 'chained5-tight',
		paper: 'osk2015',
		by: 'member',
		input: {
			...family('chained', '5'),
			quantity: 'quantum',
			relation: '<=',
			printed: '9.5106',
			method: 'Closed form',
			locator: 'Table I, n = 5'
		},
		then: 'publish'
	},
	// Three parties
	{
		key: 'gyni-local',
		paper: 'marsden2013',
		by: 'member',
		input: { ...family('gyni', '3'), quantity: 'local', printed: '1/4', locator: 'Prop. 1' },
		then: 'publish'
	},
	{
		key: 'gyni-no-signalling',
		paper: 'marsden2013',
		by: 'member',
		input: {
			...family('gyni', '3'),
			quantity: 'no-signalling',
			printed: '1/3',
			locator: 'Prop. 2'
		},
		then: 'publish'
	},
	// Percent, and one minus the value
	{
		key: 'gyni-percent',
		paper: 'wexler2021',
		by: 'member',
		input: { ...family('gyni', '3'), quantity: 'no-signalling', printed: '33.3', locator: 'p. 14' }
	},
	{
		key: 'gyni-complement',
		paper: 'wexler2021',
		by: 'member',
		input: { ...family('gyni', '3'), quantity: 'local', printed: '0.75', locator: 'p. 15' }
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
	// Withdrawn
	{
		key: 'elegant-withdrawn',
		paper: 'quill2017',
		by: 'member',
		input: {
			...family('elegant'),
			quantity: 'local',
			printed: '7',
			locator: 'eq. (21)',
			note: 'Entered from the first version of the preprint.'
		},
		then: 'withdraw'
	},
	{
		key: 'elegant-quantum',
		paper: 'quill2017',
		by: 'member',
		input: { ...family('elegant'), quantity: 'quantum', printed: '6.928', locator: 'eq. (22)' },
		then: 'publish'
	},
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
	},
	// Open: the solver refuses, and names the level that would do
	{
		key: 'gyni-level-1',
		paper: 'marsden2013',
		by: 'maintainer',
		input: {
			...family('gyni', '3'),
			quantity: 'npa',
			level: '1',
			printed: '0.2500',
			method: 'NPA level 1',
			locator: 'Prop. 3'
		}
	},
	// Under way when the demo starts
	{
		key: 'chained6-level-2',
		paper: 'osk2015',
		by: 'member',
		input: {
			...family('chained', '6'),
			quantity: 'npa',
			level: '2',
			printed: '11.5911',
			method: 'NPA level 2',
			locator: 'Sec. 5'
		},
		leaveQueued: true
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
	}
];
