import type { HybridCertificate } from '../certificates/types';
import type { Rational } from '../exact/rational';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import { collinsGisinForm, type Functional } from '../scenario/functional';
import { outcomeOfSides } from './exact-sides';
import { noSignallingHybrid } from './hybrid-no-signalling';
import { svetlichnyHybrid } from './hybrid-svetlichny';
import type { Outcome } from './outcome';
import { WorkClock } from './work-clock';

/** What one of the two models finds: exact sides, and an allowance for irrational coefficients. */
export interface HybridFinding {
	readonly below: Rational;
	readonly above: Rational;
	readonly allowance: Rational;
	readonly groups: HybridCertificate['groups'];
	readonly behaviours: HybridCertificate['behaviours'];
	readonly bipartitions: HybridCertificate['bipartitions'];
	readonly method: Readonly<Record<string, unknown>>;
}

/**
 * Maximum of a functional over mixtures of behaviours that are each local across some bipartition of
 * the parties: the largest over the bipartitions. Parties of one group share any behaviour, also a
 * signalling one (`svetlichny`), or any no-signalling behaviour (`no-signalling`).
 *
 * Guarantee: both sides by exact arithmetic; `exact` when they meet.
 * @throws SolverStop `failed` for fewer than three parties, for a party that plays no part, or
 *   (Svetlichny's model) for a functional with marginals; `limit` past the limits of the solver
 * @see Svetlichny, Phys. Rev. D 35, 3066 (1987); Bancal, Barrett, Gisin and Pironio, Phys. Rev. A
 *   88, 014102 (2013)
 */
export async function hybridMaximum(
	problem: ProblemOf<'hybrid'>,
	functional: Functional,
	control: Control
): Promise<Outcome> {
	const parties = functional.scenario.outputs.length;
	if (parties < 3)
		throw new SolverStop(
			'failed',
			`a hybrid maximum needs three parties or more, not ${parties}: with two it is the local maximum`
		);
	const idle = idleParty(functional);
	if (idle !== null)
		throw new SolverStop(
			'failed',
			`the functional does not depend on party ${idle}, which would leave the others one group: leave that party out`
		);
	const clock = new WorkClock(control, problem.seconds);
	const found =
		problem.model === 'svetlichny'
			? svetlichnyHybrid(functional, clock, control)
			: await noSignallingHybrid(functional, clock, control);
	const { below, above, allowance, groups, behaviours, bipartitions, method } = found;
	const sides = outcomeOfSides(below, above, allowance);
	return {
		...sides,
		method: { model: problem.model, bipartition: groups, ...method },
		certificate: { kind: 'hybrid', groups, behaviours, bipartitions, value: sides.exact }
	};
}

/** A party that no term looks at, though others are looked at; null when there is none. */
function idleParty(functional: Functional): number | null {
	const seen = new Set(
		collinsGisinForm(functional).terms.flatMap(({ events }) => events.map(([party]) => party))
	);
	const idle = functional.scenario.outputs.findIndex((_, party) => !seen.has(party));
	return seen.size > 0 && idle >= 0 ? idle : null;
}
