import { eq } from 'drizzle-orm';
import { NotationError } from '../../../nonlocality/exact/notation-error';
import { parseExpression } from '../../../nonlocality/scenario/expression';
import {
	FAMILIES,
	familyFunctional,
	familyLatex,
	familyTitle
} from '../../../nonlocality/scenario/families';
import { collinsGisinForm, type Functional } from '../../../nonlocality/scenario/functional';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import type { ClaimInput } from '../../../schemas/claim-input';
import type { Reader } from '../../db/client';
import { inequalities } from '../../db/schema';
import type { FieldIssue } from '../../errors';
import { findFormer } from '../inequalities/moved-inequality';
import { quantityInfo } from '../recomputations/claim-problem';
import { expressionNotation } from './notation-words';
import { readOutputs, readTable } from './read-table';
import { latexOf, textOf } from './subject-latex';
import { familySpec, noSubject, subjectOf, type SubjectReading } from './subject-reading';

/**
 * Reads what a claim is about: the same for the form's panel and for entering. Wrong input comes
 * back as issues of the form's fields; nothing is thrown.
 * @param isVisible whether the viewer may pick that known inequality
 */
export async function readSubject(
	read: Reader,
	input: ClaimInput,
	isVisible: (inequalityId: string) => Promise<boolean>
): Promise<SubjectReading> {
	switch (input.subjectKind) {
		case 'known':
			return readKnown(read, input, isVisible);
		case 'family':
			return attempt('familyParameter', () => readFamily(input));
		case 'expression':
			return attempt('expression', () => readExpression(input));
		case 'collins-gisin':
		case 'correlators':
		case 'probabilities':
			return attempt('table', () => readTableSubject(input));
		case 'described':
			return readDescribed(input);
	}
}

async function readKnown(
	read: Reader,
	{ inequalityId }: ClaimInput,
	isVisible: (inequalityId: string) => Promise<boolean>
): Promise<SubjectReading> {
	if (!inequalityId) return noSubject({ field: 'inequalityId', message: 'Choose an inequality.' });
	const [present] = await read.select().from(inequalities).where(eq(inequalities.id, inequalityId));
	// One that was merged keeps the form it had: that is what was picked.
	const former = present ? null : await findFormer(read, inequalityId);
	const row = present ?? former;
	if (!row || !(await isVisible(former?.keptId ?? inequalityId))) {
		return noSubject({ field: 'inequalityId', message: 'There is no such inequality.' });
	}
	const functional = functionalOfTerms(row.outputs, row.terms);
	return subjectOf({
		functional,
		text: row.name ?? row.latex,
		latex: row.latex,
		family: null,
		inequalityId: row.id,
		indexBase: null
	});
}

function readFamily(input: ClaimInput): SubjectReading {
	const info = FAMILIES.find(({ name }) => name === input.family);
	if (!info) return noSubject({ field: 'family', message: 'Choose a family.' });
	const family = familySpec(info, input.familyParameter);
	return subjectOf({
		functional: familyFunctional(family),
		text: familyTitle(family),
		latex: familyLatex(family),
		family,
		inequalityId: null,
		indexBase: null
	});
}

function readExpression(input: ClaimInput): SubjectReading {
	if (!input.expression.trim()) {
		return noSubject({ field: 'expression', message: 'Write the inequality.' });
	}
	const given = input.outputs.trim() ? readOutputs(input.outputs) : undefined;
	if (given && 'field' in given) return noSubject(given);
	const { functional, indexBase, chosen, claimedBound } = parseExpression(input.expression, {
		indexBase: input.indexBase === 'read' ? 'read' : input.indexBase === '1' ? 1 : 0,
		...(given ? { outputs: given } : {})
	});
	if (isConstant(functional)) return noSubject({ field: 'expression', message: CONSTANT });
	return subjectOf({
		functional,
		text: input.expression.trim().replace(/\s+/g, ' '),
		latex: latexOf(functional, indexBase ?? 0),
		family: null,
		inequalityId: null,
		indexBase: indexBase === null ? null : { base: indexBase, chosen },
		notation: expressionNotation(input.expression),
		besideIt: claimedBound,
		otherBase: indexBase === null ? null : readWithOtherBase(input.expression, indexBase, given)
	});
}

/**
 * Counting from the other number renames inputs, which changes no value unless inputs of one party
 * differ in their outputs.
 */
function readWithOtherBase(
	expression: string,
	base: 0 | 1,
	outputs: readonly (readonly number[])[] | undefined
): Functional | null {
	if (!outputs?.some((party) => new Set(party).size > 1)) return null;
	try {
		return parseExpression(expression, { indexBase: base === 0 ? 1 : 0, outputs }).functional;
	} catch (error) {
		if (error instanceof NotationError) return null; // it has no meaning with the other base
		throw error;
	}
}

const CONSTANT = 'This is the same number for every behaviour: everything else cancels.';

function isConstant(functional: Functional): boolean {
	return collinsGisinForm(functional).terms.every(({ events }) => events.length === 0);
}

function readTableSubject(input: ClaimInput): SubjectReading {
	const read = readTable(input);
	if ('field' in read) return noSubject(read);
	const { functional, notation } = read;
	if (isConstant(functional)) return noSubject({ field: 'table', message: CONSTANT });
	return subjectOf({
		functional,
		notation,
		text: textOf(functional),
		latex: latexOf(functional, 0),
		family: null,
		inequalityId: null,
		indexBase: null
	});
}

function readDescribed(input: ClaimInput): SubjectReading {
	if (quantityInfo(input.quantity).subject === 'functional') {
		return noSubject({
			field: 'subjectKind',
			message: 'This quantity is that of an inequality: find it, pick a family, or write it.'
		});
	}
	const text = input.described.trim();
	if (!text) return noSubject({ field: 'described', message: 'Say what the claim is about.' });
	return subjectOf({
		functional: null,
		text,
		latex: null,
		family: null,
		inequalityId: null,
		indexBase: null
	});
}

/** Notation errors become issues of the field, with the place and what to write instead. */
function attempt(field: string, work: () => SubjectReading): SubjectReading {
	try {
		return work();
	} catch (error) {
		if (error instanceof NotationError) return noSubject(issueOf(field, error));
		if (error instanceof RangeError) return noSubject({ field, message: sentence(error.message) });
		throw error;
	}
}

export function issueOf(field: string, error: NotationError): FieldIssue {
	const message = [sentence(error.message), error.suggestion].filter(Boolean).join(' ');
	return { field, message, ...(error.position === null ? {} : { position: error.position }) };
}

function sentence(message: string): string {
	const capital = message.charAt(0).toUpperCase() + message.slice(1);
	// A party's letter or P(...) at the start is a name, not a word.
	return /[.!?]$/.test(capital) ? capital : `${capital}.`;
}
