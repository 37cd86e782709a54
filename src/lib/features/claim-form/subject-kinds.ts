import { QUANTITIES } from '../../ledger/quantities';
import type { SubjectKind } from '../../ledger/claim';

/** How an inequality can be given, as the form words it. */
export const SUBJECT_CHOICES: readonly { readonly value: SubjectKind; readonly label: string }[] = [
	{ value: 'known', label: 'Find' },
	{ value: 'family', label: 'Family' },
	{ value: 'expression', label: 'Write it' },
	{ value: 'collins-gisin', label: 'Collins-Gisin table' },
	{ value: 'correlators', label: 'Correlator table' },
	{ value: 'probabilities', label: 'Probability table' },
	{ value: 'described', label: 'In words' }
];

export const QUANTITY_CHOICES = QUANTITIES.map(({ key, label }) => ({ value: key, label }));

export const RELATION_CHOICES = [
	{ value: '=', label: '= is' },
	{ value: '<=', label: '≤ is at most' },
	{ value: '>=', label: '≥ is at least' }
];

export const READING_CHOICES = [
	{ value: 'as-printed', label: 'As its form says' },
	{ value: 'rounded', label: 'Rounded' },
	{ value: 'truncated', label: 'Truncated' },
	{ value: 'exact', label: 'Exact' }
];

export const INDEX_CHOICES = [
	{ value: 'read', label: 'Read from the text' },
	{ value: '0', label: 'From 0' },
	{ value: '1', label: 'From 1' }
];

export const LEVEL_CHOICES = [
	{ value: '1', label: '1' },
	{ value: '1+AB', label: '1+AB' },
	{ value: '2', label: '2' },
	{ value: '3', label: '3' }
];
