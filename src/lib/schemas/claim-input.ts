import { z } from 'zod';
import { READINGS, RELATIONS, SENSES, SUBJECT_KINDS, VISIBILITIES } from '../ledger/claim';
import { QUANTITIES, type QuantityKey } from '../ledger/quantities';

/** Longest texts a claim's fields take; a paste beyond them is refused before anything parses it. */
export const CLAIM_LIMITS = {
	expression: 4_000,
	table: 20_000,
	printed: 200,
	line: 300,
	bibtex: 20_000,
	note: 4_000
} as const;

const text = (limit: number) =>
	z
		.string()
		.max(limit, `At most ${limit.toLocaleString('en')} characters`)
		.default('');

/**
 * The fields of the claim form, flat so that the form works without JavaScript. Which of them count
 * depends on `subjectKind`, `quantity` and `paper`; services/claims reads them.
 */
export const claimInput = z.object({
	subjectKind: z.enum(SUBJECT_KINDS).default('expression'),
	inequalityId: text(40),
	family: text(40),
	/** alpha, n or d of the family, or the rows of the xor game's matrix. */
	familyParameter: text(2_000),
	expression: text(CLAIM_LIMITS.expression),
	/** `read`: from what was written. */
	indexBase: z.enum(['read', '0', '1']).default('read'),
	/** Rows on lines, cells separated by spaces, commas, semicolons or tabs. */
	table: text(CLAIM_LIMITS.table),
	/** Outputs per input for tables and expressions: `2 2 / 2 2`; empty: the smallest scenario. */
	outputs: text(200),
	/** A subject in words, for quantities that are not about an inequality. */
	described: text(CLAIM_LIMITS.line),
	quantity: z
		.enum(QUANTITIES.map((q) => q.key) as [QuantityKey, ...QuantityKey[]])
		.default('quantum'),
	sense: z.enum(SENSES).default('max'),
	/** `1`, `1+AB`, `2`, `3`. */
	level: text(40),
	nonNegative: z.boolean().default(false),
	dimension: text(10),
	relation: z.enum(RELATIONS).default('='),
	printed: text(CLAIM_LIMITS.printed),
	reading: z.enum(READINGS).default('as-printed'),
	method: text(CLAIM_LIMITS.line),
	paper: z.enum(['known', 'bibtex']).default('bibtex'),
	referenceId: text(40),
	bibtex: text(CLAIM_LIMITS.bibtex),
	locator: text(CLAIM_LIMITS.line),
	note: text(CLAIM_LIMITS.note),
	visibility: z.enum(VISIBILITIES).default('group')
});

export type ClaimInput = z.infer<typeof claimInput>;
