import type { SubjectView } from '../../../schemas/views';
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
