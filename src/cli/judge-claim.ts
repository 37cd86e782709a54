import { acceptedSet } from '../lib/ledger/accepted-set';
import type { Relation } from '../lib/ledger/claim';
import { correlatorGame } from '../lib/ledger/correlator-game';
import { diagnose, type Diagnosis, type OtherValue } from '../lib/ledger/diagnosis';
import {
	IDENTITY_MAP,
	evidenceOfFinding,
	exactValueOf,
	othersOfFindings,
	type Finding
} from '../lib/ledger/evidence';
import { valueWithOtherBase } from '../lib/ledger/index-base';
import { judge, type RecomputationState } from '../lib/ledger/judgement';
import { knownNormalisations } from '../lib/ledger/normalisations';
import { valueLabel } from '../lib/ledger/problem-labels';
import type { StatedValue } from '../lib/ledger/stated-value';
import { deriveVerdict, type Verdict } from '../lib/ledger/verdict';
import { solve, verifyResult, type Control, type Problem, type Result } from '../lib/nonlocality';
import { toDoubleDown, toDoubleUp } from '../lib/nonlocality/exact/rational';
import { functionalOfTerms } from '../lib/nonlocality/notation';
import { parseProblem } from '../lib/schemas/problem';
import type { ClaimJson } from '../lib/schemas/claim-json';
import { STATION_BUDGET, claimStations } from './claim-stations';
import { knownFamily } from './known-family';

export interface JudgedClaim {
	readonly verdict: Verdict;
	readonly result: Result;
	/** The other quantities that were compared with. */
	readonly others: readonly OtherValue[];
}

/**
 * Recomputes a claim's quantity and judges it as the ledger does; on a doubt, with the stations, as
 * far as they are needed: what agrees needs no diagnosis.
 */
export async function judgeClaim(
	claim: ClaimJson,
	reading: StatedValue,
	problem: Problem,
	control: Control,
	budget = STATION_BUDGET
): Promise<JudgedClaim> {
	const result = await solve(endingWhenSettled(problem, reading, claim.relation), control);
	const findings = checked(result);
	const state: RecomputationState =
		result.status === 'done' ? { kind: 'done' } : { kind: 'failed', why: result.reason };
	const quantity = valueLabel(problem).replace(/^the /, '');
	const input = () => ({
		reading,
		relation: claim.relation,
		evidence: findings.flatMap((finding) => evidenceOfFinding(finding, problem, IDENTITY_MAP)),
		recomputation: state,
		quantity
	});
	const agrees = () => judge(input()).status === 'agreement';
	for (const station of claimStations(problem, budget)) {
		if (agrees()) break;
		findings.push(...checked(await solve(station, control)));
	}
	if (agrees())
		return { verdict: { ...deriveVerdict(input()), diagnosis: [] }, result, others: [] };

	const others = othersOfFindings(findings, problem, IDENTITY_MAP, claim.method);
	const { status, reasonCode, enclosure } = judge(input());
	const diagnosis: Diagnosis[] = diagnose({
		reading,
		relation: claim.relation,
		quantity: problem.quantity,
		status,
		reasonCode,
		enclosure,
		others,
		normalisations: knownNormalisations({
			...knownFamily(problem),
			outputs: problem.outputs,
			game: correlatorGame(functionalOfTerms(problem.outputs, problem.terms)),
			localMaximum: exactValueOf(findings, 'local')
		}),
		indexBaseAlternative:
			status === 'discrepancy' ? await otherIndexBase(claim, problem, control) : null
	});
	return { verdict: { ...deriveVerdict(input()), diagnosis }, result, others };
}

/**
 * A quantum maximum has no end of its own: it may end where an equality agrees. Bounds are shown
 * with their slack, and what disagrees with its reason: those take the digits that they can get.
 */
function endingWhenSettled(problem: Problem, reading: StatedValue, relation: Relation): Problem {
	if (problem.quantity !== 'quantum' || relation !== '=' || problem.within) return problem;
	const { low, high } = acceptedSet(reading, relation, false);
	return low && high ? { ...problem, within: [toDoubleUp(low), toDoubleDown(high)] } : problem;
}

/** A finished result with its check; nothing for one that did not finish. */
function checked(result: Result): Finding[] {
	return result.status === 'done' ? [{ result, check: verifyResult(result) }] : [];
}

/** The claimed quantity of the expression read with the other index base, where it can be. */
async function otherIndexBase(
	{ problem: written }: ClaimJson,
	claimed: Problem,
	control: Control
): Promise<OtherValue | null> {
	if (!('expression' in written)) return null;
	const base = 'indexBase' in written && written.indexBase === 1 ? 0 : 1;
	let problem: Problem;
	try {
		problem = parseProblem({ ...written, indexBase: base });
	} catch {
		return null; // the expression has no meaning with the other base
	}
	if (JSON.stringify(problem.terms) === JSON.stringify(claimed.terms)) return null;
	const [finding] = checked(await solve(problem, control));
	return finding ? valueWithOtherBase(finding, base) : null;
}
