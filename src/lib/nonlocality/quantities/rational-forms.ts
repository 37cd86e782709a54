import { overCommonDenominator } from '../exact/common-denominator';
import type { Rational } from '../exact/rational';
import type { ProblemOf } from '../problem';
import { collinsGisinForm, type Functional } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import { momentOfEvents } from './moment-matrix';
import type { MomentProblem } from './moment-problem';

/** A linear form on the moments, exactly; moment 0 is the constant. */
export type RationalForm = ReadonlyMap<number, Rational>;

/** The functional and the constraints of a relaxation. */
export interface RationalForms {
	readonly objective: RationalForm;
	/** >= 0 or = 0, as in the relaxation. */
	readonly constraints: readonly {
		readonly place: number;
		readonly free: boolean;
		readonly form: RationalForm;
		/** times `form` is integral. */
		readonly denominator: bigint;
	}[];
}

/** Null where a coefficient is irrational. */
export function rationalForms(
	problem: ProblemOf<'npa'>,
	g: Functional,
	{ matrix }: MomentProblem
): RationalForms | null {
	const formOf = (functional: Functional, sign: 1n | -1n): RationalForm | null => {
		const form = new Map<number, Rational>();
		for (const { events, coefficient } of collinsGisinForm(functional).terms) {
			const moment = momentOfEvents(matrix, events);
			if (moment === null || !coefficient.exact) return null;
			form.set(moment, sign < 0n ? coefficient.exact.neg() : coefficient.exact);
		}
		return form;
	};
	const objective = formOf(g, 1n);
	if (!objective) return null;
	const constraints: RationalForms['constraints'][number][] = [];
	for (const [place, { terms, value, relation }] of problem.constraints.entries()) {
		const difference = [...terms, [`-(${value})`, []] as const];
		const form = formOf(functionalOfTerms(g.scenario, difference), relation === '<=' ? -1n : 1n);
		if (!form) return null;
		const { denominator } = overCommonDenominator([...form.values()]);
		constraints.push({ place, free: relation === '=', form, denominator });
	}
	return { objective, constraints };
}
