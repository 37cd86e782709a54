import { family, type SeedClaim } from './seed-claim';

export const FAMILY_CLAIMS: readonly SeedClaim[] = [
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
	// Open: level 1 lacks the moments of three parties, so that it has no value here
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
	}
];
