import type { SubjectView } from '../../../schemas/views';
import type { claims, inequalities } from '../../db/schema';
import { typeset } from '../../math/typeset';

export interface SubjectParts {
	readonly inequalityId: string | null;
	readonly name: string | null;
	readonly nameLatex: string | null;
	/** As entered, or the representative's formula. */
	readonly text: string;
	readonly latex: string | null;
	readonly scenario: string | null;
}

/** A name where there is one, else the formula; what is copied is always the formula. */
export function subjectView(parts: SubjectParts): SubjectView {
	const { name, nameLatex, latex } = parts;
	const shown = name === null ? latex : nameLatex;
	return {
		inequalityId: parts.inequalityId,
		text: name ?? parts.text,
		html: shown === null ? null : typeset(shown),
		latex,
		scenario: parts.scenario ?? ''
	};
}

type ClaimOnIt = Pick<typeof claims.$inferSelect, 'inequalityId' | 'subject' | 'subjectLatex'>;
type NamedInequality = Pick<typeof inequalities.$inferSelect, 'name' | 'nameLatex' | 'scenario'>;

/** The subject of a claim: the inequality's name where it has one, else what was entered. */
export function claimSubject(claim: ClaimOnIt, inequality: NamedInequality | null): SubjectView {
	return subjectView({
		inequalityId: claim.inequalityId,
		name: inequality?.name ?? null,
		nameLatex: inequality?.nameLatex ?? null,
		text: claim.subject,
		latex: claim.subjectLatex,
		scenario: inequality?.scenario ?? null
	});
}
