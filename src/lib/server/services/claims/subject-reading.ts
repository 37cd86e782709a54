import type { Relation } from '../../../ledger/claim';
import type { FamilySpec, FamilyInfo } from '../../../nonlocality/scenario/families';
import type { Functional } from '../../../nonlocality/scenario/functional';
import type { FieldIssue } from '../../errors';

/** What was read of a claim's subject; the functional is null for a subject given in words. */
export interface ReadSubject {
	readonly functional: Functional | null;
	/** Plain text, as entered. */
	readonly text: string;
	readonly latex: string | null;
	readonly family: FamilySpec | null;
	/** Set when the subject was picked among the known ones. */
	readonly inequalityId: string | null;
	readonly indexBase: { readonly base: 0 | 1; readonly chosen: boolean } | null;
	/** How it was written, for its writer to see: `Correlator table, 3 × 3 inputs`. */
	readonly notation?: string;
	/** `<= 2` written behind the expression: a bound the paper claims, no part of the functional. */
	readonly besideIt?: { readonly relation: Relation; readonly text: string } | null;
	/** The expression with its inputs counted from the other number, where its values may differ. */
	readonly otherBase?: Functional | null;
}

export type SubjectReading =
	| { readonly subject: ReadSubject; readonly issues: readonly [] }
	| { readonly subject: null; readonly issues: readonly FieldIssue[] };

export const subjectOf = (subject: ReadSubject): SubjectReading => ({ subject, issues: [] });

export const noSubject = (...issues: FieldIssue[]): SubjectReading => ({ subject: null, issues });

/** The form's one field for a family's parameter, as the problem format names it. */
export function familySpec(info: FamilyInfo, parameter: string): FamilySpec {
	const text = parameter.trim();
	switch (info.parameter?.key) {
		case undefined:
			return { name: info.name };
		case 'alpha':
			return { name: info.name, alpha: text };
		case 'n':
			return { name: info.name, n: text };
		case 'd':
			return { name: info.name, d: text };
		case 'matrix':
			return {
				name: info.name,
				matrix: text
					.split(/[\n;]/)
					.map((row) => row.trim().split(/[\s,]+/))
					.filter((row) => row.some(Boolean))
			};
	}
}
