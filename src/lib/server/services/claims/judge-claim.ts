import { eq } from 'drizzle-orm';
import type { Evidence } from '../../../ledger/enclosure';
import { evidenceOfFinding, type AffineMap, type Finding } from '../../../ledger/evidence';
import { judge, type RecomputationState } from '../../../ledger/judgement';
import { contradictionText, heardReproductions } from '../../../ledger/reproductions';
import { readStatedValue } from '../../../ledger/stated-value';
import { deriveVerdict, type Verdict } from '../../../ledger/verdict';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { Problem } from '../../../nonlocality/problem';
import type { Transaction } from '../../db/client';
import { inequalities, recomputations, type claims } from '../../db/schema';
import { readMap, type AffineMap as EnclosedMap } from '../inequalities/affine';
import {
	claimProblem,
	quantityInfo,
	quantityProblem,
	readQuantity
} from '../recomputations/claim-problem';
import type { ProblemSubjectData } from '../recomputations/station-problems';
import { loadSubmittedFindings } from '../submissions/load-submitted-findings';
import { explainVerdict } from './explain-verdict';
import type { FindingsOf } from './findings';
import { loadReproductions, type StoredReproduction } from './reproductions';

export type JudgedClaim = typeof claims.$inferSelect;

interface OwnRun {
	readonly problem: Problem;
	readonly state: RecomputationState;
}

/** A verdict, and what it means for people's submissions. */
export interface Judged {
	readonly verdict: Verdict;
	/** Accepted until now, but excluded by what is proved; with both numbers in a sentence. */
	readonly contradicted: readonly { readonly submissionId: string; readonly why: string }[];
}

/** The verdict on a claim from everything that is known in this transaction. Writes nothing. */
export async function judgeClaim(
	tx: Transaction,
	claim: JudgedClaim,
	findingsOf: FindingsOf
): Promise<Judged> {
	const reading = readStatedValue(claim.printed, claim.reading);
	const own = await ownRun(tx, claim);
	const findings = own ? await findingsOf(claim) : [];
	const map = readMap(claim);
	// What a person attached and the check accepted is a proof like the machine's, also where no
	// run of ours could start.
	const attached = await loadSubmittedFindings(tx, claim);
	const claimed = own?.problem ?? (attached.length > 0 ? await claimedProblem(tx, claim) : null);
	const computed = claimed
		? [...findings, ...attached].flatMap((f) => evidenceIn(f, claimed, map))
		: [];
	const found = await loadReproductions(tx, claim);
	const heard = heardReproductions(found, computed);
	const evidence = [...computed, ...heard.map((reproduction) => reproduction.evidence)];
	const recomputation = own?.state ?? (await noSolver(tx, claim));
	const input = {
		reading,
		relation: claim.relation,
		evidence,
		recomputation,
		quantity: claim.quantityLabel
	};
	const diagnosis = own
		? await explainVerdict(tx, { claim, judged: input, findings, claimed: own.problem, map })
		: [];
	const { contradicting } = judge(input);
	const excluded = found.filter((reproduction) => contradicting.includes(reproduction.evidence));
	return {
		verdict: { ...deriveVerdict(input), ...contradictionsOf(excluded), diagnosis },
		contradicted: excluded
			.filter(({ state }) => state === 'accepted')
			.map((reproduction) => ({
				submissionId: reproduction.submissionId,
				why: contradictionText(reproduction.found, computed)
			}))
	};
}

function contradictionsOf(excluded: readonly StoredReproduction[]): Pick<Verdict, 'contradicting'> {
	if (excluded.length === 0) return {};
	return {
		contradicting: excluded.map(({ submissionId, taskNumber, evidence }) => ({
			submissionId,
			taskNumber,
			label: evidence.lowerLabel
		}))
	};
}

async function ownRun(tx: Transaction, claim: JudgedClaim): Promise<OwnRun | null> {
	if (claim.recomputationId === null) return null;
	const [row] = await tx
		.select({
			problem: recomputations.problem,
			state: recomputations.state,
			renewal: recomputations.renewal,
			checked: recomputations.checked,
			reason: recomputations.reason
		})
		.from(recomputations)
		.where(eq(recomputations.id, claim.recomputationId));
	if (!row) return null;
	const why = row.reason ?? 'the reason was not recorded';
	const states: Record<typeof row.state, RecomputationState> = {
		queued: { kind: 'not-run' },
		running: { kind: 'running' },
		done: { kind: 'done' },
		failed: { kind: 'failed', why },
		cancelled: { kind: 'failed', why: 'it was cancelled' }
	};
	// Done over by a newer solver: what it proved stands meanwhile.
	const stands = row.renewal && row.checked === true;
	return { problem: row.problem, state: stands ? states.done : states[row.state] };
}

/** Why nothing recomputes the claim: no solver for the quantity, or a limit of the one there is. */
async function noSolver(tx: Transaction, claim: JudgedClaim): Promise<RecomputationState> {
	const subject = await servedSubject(tx, claim);
	if (!subject) return { kind: 'no-solver' };
	const found = claimProblem(claim.input, readQuantity(claim.input), subject, 1);
	return { kind: 'no-solver', ...('why' in found ? { why: found.why } : {}) };
}

/** What is claimed, for comparison only; null where its sets have no place among the others. */
async function claimedProblem(tx: Transaction, claim: JudgedClaim): Promise<Problem | null> {
	const subject = await servedSubject(tx, claim);
	if (!subject) return null;
	const found = quantityProblem(claim.input, readQuantity(claim.input), subject, 1);
	return 'problem' in found ? found.problem : null;
}

/** The inequality of a claim whose quantity has a solver. */
async function servedSubject(
	tx: Transaction,
	{ inequalityId, input }: JudgedClaim
): Promise<ProblemSubjectData | null> {
	if (inequalityId === null || quantityInfo(input.quantity).solver === null) return null;
	const [subject] = await tx
		.select({ outputs: inequalities.outputs, terms: inequalities.terms })
		.from(inequalities)
		.where(eq(inequalities.id, inequalityId));
	return subject ?? null;
}

/**
 * Evidence in the claim's normalisation. Where scale or shift is irrational, it is the widest that
 * the enclosed map allows, so that what was proved stays proved.
 */
function evidenceIn(
	finding: Finding,
	claimed: Problem,
	{ scale, shift }: EnclosedMap
): readonly Evidence[] {
	const at = (s: Rational, t: Rational): AffineMap => ({ scale: s, shift: t });
	const exact = scale.low.equals(scale.high) && shift.low.equals(shift.high);
	const first = evidenceOfFinding(finding, claimed, at(scale.low, shift.low));
	if (exact) return first;
	const corners = [
		first,
		evidenceOfFinding(finding, claimed, at(scale.low, shift.high)),
		evidenceOfFinding(finding, claimed, at(scale.high, shift.low)),
		evidenceOfFinding(finding, claimed, at(scale.high, shift.high))
	];
	return first.map((evidence, i) => ({
		...evidence,
		lower: extreme(
			corners.map((c) => c[i]?.lower ?? null),
			-1
		),
		upper: extreme(
			corners.map((c) => c[i]?.upper ?? null),
			1
		)
	}));
}

function extreme(values: readonly (Rational | null)[], direction: 1 | -1): Rational | null {
	return values.reduce((best, value) =>
		best && value ? (value.compare(best) * direction > 0 ? value : best) : null
	);
}
