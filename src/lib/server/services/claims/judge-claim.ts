import { eq } from 'drizzle-orm';
import type { Evidence } from '../../../ledger/enclosure';
import { evidenceOfFinding, type AffineMap } from '../../../ledger/evidence';
import type { RecomputationState } from '../../../ledger/judgement';
import { readStatedValue } from '../../../ledger/stated-value';
import { deriveVerdict, type Verdict } from '../../../ledger/verdict';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { Problem } from '../../../nonlocality/problem';
import type { Transaction } from '../../db/client';
import { inequalities, recomputations, type claims } from '../../db/schema';
import { readMap, type AffineMap as EnclosedMap } from '../inequalities/affine';
import { claimProblem, quantityInfo, readQuantity } from '../recomputations/claim-problem';
import { explainVerdict } from './explain-verdict';
import type { FindingsOf, StoredFinding } from './findings';

export type JudgedClaim = typeof claims.$inferSelect;

interface OwnRun {
	readonly problem: Problem;
	readonly state: RecomputationState;
}

/** The verdict on a claim from everything that is known in this transaction. Writes nothing. */
export async function judgeClaim(
	tx: Transaction,
	claim: JudgedClaim,
	findingsOf: FindingsOf
): Promise<Verdict> {
	const reading = readStatedValue(claim.printed, claim.reading);
	const own = await ownRun(tx, claim);
	const findings = own ? await findingsOf(claim) : [];
	const map = readMap(claim);
	const evidence = own ? findings.flatMap((f) => evidenceIn(f, own.problem, map)) : [];
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
	return { ...deriveVerdict(input), diagnosis };
}

async function ownRun(tx: Transaction, claim: JudgedClaim): Promise<OwnRun | null> {
	if (claim.recomputationId === null) return null;
	const [row] = await tx
		.select({
			problem: recomputations.problem,
			state: recomputations.state,
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
	return { problem: row.problem, state: states[row.state] };
}

/** Why nothing recomputes the claim: no solver for the quantity, or a limit of the one there is. */
async function noSolver(tx: Transaction, claim: JudgedClaim): Promise<RecomputationState> {
	if (claim.inequalityId === null || quantityInfo(claim.input.quantity).solver === null) {
		return { kind: 'no-solver' };
	}
	const [subject] = await tx
		.select({ outputs: inequalities.outputs, terms: inequalities.terms })
		.from(inequalities)
		.where(eq(inequalities.id, claim.inequalityId));
	const reading = readQuantity(claim.input);
	const found = subject && claimProblem(claim.input, reading, subject, 1);
	return { kind: 'no-solver', ...(found && 'why' in found ? { why: found.why } : {}) };
}

/**
 * Evidence in the claim's normalisation. Where scale or shift is irrational, it is the widest that
 * the enclosed map allows, so that what was proved stays proved.
 */
function evidenceIn(
	finding: StoredFinding,
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
