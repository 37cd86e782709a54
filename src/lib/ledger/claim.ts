export const RELATIONS = ['=', '<=', '>='] as const;
export type Relation = (typeof RELATIONS)[number];

export const RELATION_SIGNS: Readonly<Record<Relation, string>> = {
	'=': '=',
	'<=': '≤',
	'>=': '≥'
};

export const READINGS = ['as-printed', 'rounded', 'truncated', 'exact'] as const;
/** How the printed value is to be read; `as-printed` lets its form decide. */
export type ReadingChoice = (typeof READINGS)[number];

export const VERDICT_STATUSES = ['agreement', 'discrepancy', 'open'] as const;
export type VerdictStatus = (typeof VERDICT_STATUSES)[number];

export const STATUS_LABELS: Readonly<Record<VerdictStatus, string>> = {
	agreement: 'Agreement',
	discrepancy: 'Discrepancy',
	open: 'Open'
};

export const CLAIM_STATES = ['active', 'superseded', 'withdrawn'] as const;
export type ClaimState = (typeof CLAIM_STATES)[number];

/** `proposed`: a member asks for it to be public; only a maintainer makes it so. */
export const VISIBILITIES = ['group', 'proposed', 'public'] as const;
export type Visibility = (typeof VISIBILITIES)[number];

export const SENSES = ['max', 'min'] as const;
export type Sense = (typeof SENSES)[number];

/** How a claim's inequality (or other subject) was given. */
export const SUBJECT_KINDS = [
	'known',
	'family',
	'expression',
	'collins-gisin',
	'correlators',
	'probabilities',
	'described'
] as const;
export type SubjectKind = (typeof SUBJECT_KINDS)[number];
