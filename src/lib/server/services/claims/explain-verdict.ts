import { eq } from 'drizzle-orm';
import { correlatorGame, gameOfMapped } from '../../../ledger/correlator-game';
import { diagnose } from '../../../ledger/diagnose';
import type { Diagnosis, OtherValue } from '../../../ledger/diagnosis';
import { othersOfFindings } from '../../../ledger/evidence';
import { valueWithOtherBase } from '../../../ledger/index-base';
import { judge, type JudgementInput } from '../../../ledger/judgement';
import { knownNormalisations } from '../../../ledger/normalisations';
import type { StatedValue } from '../../../ledger/stated-value';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { Problem } from '../../../nonlocality/problem';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import type { Transaction } from '../../db/client';
import { inequalities } from '../../db/schema';
import { mapSides, type AffineMap } from '../inequalities/affine';
import { familyOfName } from '../inequalities/family-of-name';
import { loadFinding, type StoredFinding } from './findings';
import type { JudgedClaim } from './judge-claim';

export interface Explained {
	readonly claim: JudgedClaim;
	readonly judged: JudgementInput & { readonly reading: StatedValue };
	readonly findings: readonly StoredFinding[];
	readonly claimed: Problem;
	readonly map: AffineMap;
}

/** Ways in which a claim that disagrees, or is not settled, would agree; best first. */
export async function explainVerdict(
	tx: Transaction,
	{ claim, judged, findings, claimed, map }: Explained
): Promise<readonly Diagnosis[]> {
	const { status, reasonCode, enclosure } = judge(judged);
	if (!enclosure || status === 'agreement') return [];
	// An irrational map is enclosed to 1e-28: its middle is enough to recognise a value.
	const middle = {
		scale: map.scale.low.add(map.scale.high).div(2),
		shift: map.shift.low.add(map.shift.high).div(2)
	};
	return diagnose({
		reading: judged.reading,
		relation: judged.relation,
		quantity: claim.quantity,
		status,
		reasonCode,
		enclosure,
		others: othersOfFindings(findings, claimed, middle, claim.method),
		normalisations: await normalisationsOf(tx, claim, findings, map, middle),
		indexBaseAlternative: status === 'discrepancy' ? await otherIndexBase(tx, claim) : null
	});
}

/** The claimed quantity with the inputs counted from the other number, where that was recomputed. */
async function otherIndexBase(
	tx: Transaction,
	{ otherBaseRecomputationId, input }: JudgedClaim
): Promise<OtherValue | null> {
	const finding = otherBaseRecomputationId ? await loadFinding(tx, otherBaseRecomputationId) : null;
	// A base that was read is 1: with an index 0 the expression has no meaning with any other.
	return finding && valueWithOtherBase(finding, input.indexBase === '0' ? 1 : 0);
}

async function normalisationsOf(
	tx: Transaction,
	claim: JudgedClaim,
	findings: readonly StoredFinding[],
	map: AffineMap,
	middle: { readonly scale: Rational; readonly shift: Rational }
) {
	if (!claim.inequalityId) return [];
	const [row] = await tx
		.select({
			name: inequalities.name,
			outputs: inequalities.outputs,
			terms: inequalities.terms
		})
		.from(inequalities)
		.where(eq(inequalities.id, claim.inequalityId));
	if (!row) return [];
	const family = familyOfName(row.name);
	const game = correlatorGame(functionalOfTerms(row.outputs, row.terms));
	const local = findings.find(
		({ result, check }) =>
			check?.checked && result.quantity === 'local' && result.problem.sense === 'max'
	);
	const sides = local?.check?.checked ? mapSides(map, local.check) : null;
	const exact = sides?.lower && sides.upper?.equals(sides.lower) ? sides.lower : null;
	return knownNormalisations({
		family,
		...(family ? { fromFamily: middle } : {}),
		outputs: row.outputs,
		localMaximum: exact,
		game: game && gameOfMapped(game, middle.scale, middle.shift)
	});
}
