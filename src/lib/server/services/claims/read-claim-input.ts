import { and, eq } from 'drizzle-orm';
import type { Relation } from '../../../ledger/claim';
import {
	StatedValueError,
	claimedRelation,
	readStatedValue,
	type StatedValue
} from '../../../ledger/stated-value';
import type { ClaimInput } from '../../../schemas/claim-input';
import type { GroupContext } from '../../context';
import { references } from '../../db/schema';
import type { FieldIssue } from '../../errors';
import type { ParsedReference } from '../../references/parse-bibtex';
import { readReference } from '../../references/read-reference';
import type { CanonicalSubject } from '../inequalities/canonical-subject';
import { placeSubject } from '../inequalities/place-subject';
import { isVisibleToGroup } from '../inequalities/visibility';
import { readQuantity, type QuantityReading } from '../recomputations/claim-problem';
import { readSubject } from './read-subject';
import type { ReadSubject } from './subject-reading';

export type ReadPaper =
	| { readonly kind: 'known'; readonly id: string; readonly formatted: string }
	| { readonly kind: 'new'; readonly bibtex: string; readonly parsed: ParsedReference };

/** A claim's form as it was understood; a part that could not be read is null and has an issue. */
export interface ReadClaimInput {
	readonly subject: ReadSubject | null;
	/** Where the subject's functional belongs. */
	readonly place: CanonicalSubject | null;
	readonly quantity: QuantityReading;
	readonly relation: Relation;
	readonly stated: StatedValue | null;
	readonly paper: ReadPaper | null;
	readonly issues: readonly FieldIssue[];
}

/** Everything that is checked of a claim, in one place for the form's panel and for entering. */
export async function readClaimInput(
	ctx: GroupContext,
	input: ClaimInput
): Promise<ReadClaimInput> {
	const issues: FieldIssue[] = [];
	const subject = await readSubject(ctx.db.read, input, (id) =>
		isVisibleToGroup(ctx.db.read, id, ctx.group.id)
	);
	issues.push(...subject.issues);
	const quantity = readQuantity(input);
	issues.push(...quantity.issues);
	const value = readValue(input);
	if ('issue' in value) issues.push(value.issue);
	const paper = await readPaper(ctx, input);
	if ('field' in paper) issues.push(paper);
	if (!input.locator.trim()) {
		issues.push({
			field: 'locator',
			message: 'Say where in the paper: an equation, table, figure, page or theorem.'
		});
	}
	const functional = subject.subject?.functional ?? null;
	return {
		subject: subject.subject,
		place: functional && (await placeSubject(functional)),
		quantity,
		relation: 'issue' in value ? input.relation : value.relation,
		stated: 'issue' in value ? null : value.stated,
		paper: 'field' in paper ? null : paper,
		issues
	};
}

type ReadValue =
	{ readonly stated: StatedValue; readonly relation: Relation } | { readonly issue: FieldIssue };

function readValue({ printed, reading, relation }: ClaimInput): ReadValue {
	// An empty field has no place to point at.
	if (!printed.trim()) {
		return { issue: { field: 'printed', message: 'Give the value as printed.' } };
	}
	try {
		const stated = readStatedValue(printed, reading);
		const claimed = claimedRelation(stated, relation);
		if (!claimed) {
			const message = `The value starts with another sign than the relation ${relation}; keep one.`;
			return { issue: { field: 'printed', message, position: 0 } };
		}
		return { stated, relation: claimed };
	} catch (error) {
		if (!(error instanceof StatedValueError)) throw error;
		return { issue: { field: 'printed', message: error.message, position: error.position } };
	}
}

async function readPaper(ctx: GroupContext, input: ClaimInput): Promise<ReadPaper | FieldIssue> {
	if (input.paper === 'known') {
		const [row] = await ctx.db.read
			.select({ id: references.id, formatted: references.formatted })
			.from(references)
			.where(and(eq(references.groupId, ctx.group.id), eq(references.id, input.referenceId)));
		return row ? { kind: 'known', ...row } : { field: 'referenceId', message: 'Choose a paper.' };
	}
	const reading = await readReference(input.bibtex);
	if (reading.ok) return { kind: 'new', bibtex: input.bibtex, parsed: reading.reference };
	const { message, position } = reading;
	return { field: 'bibtex', message, ...(position === null ? {} : { position }) };
}
