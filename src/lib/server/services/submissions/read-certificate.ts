import { evidenceOfFinding, IDENTITY_MAP, type Finding } from '../../../ledger/evidence';
import { soughtLabel } from '../../../ledger/problem-labels';
import { parseRational } from '../../../nonlocality/exact/rational';
import type { CheckOutcome } from '../../../nonlocality/certificates/types';
import type { DoneResult, Problem } from '../../../nonlocality/problem';
import { JsonTextError, parseJsonText } from '../../../schemas/json-text';
import {
	ProblemError,
	ProblemLimitError,
	UnsolvedQuantityError
} from '../../../schemas/problem-error';
import { parseResult } from '../../../schemas/result';
import { TASK_LIMITS } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { runShortTask } from '../../jobs/current-pool';
import type { ClaimRow } from '../claims/find-claim';
import { mapSides, readMap, showSides } from '../inequalities/affine';
import { findInequality, type InequalityRecord } from '../inequalities/inequality-rows';
import { quantityProblem, readQuantity } from '../recomputations/claim-problem';
import { problemLabel } from '../recomputations/problem-label';
import { certifiedFinding } from './certified-finding';
import { OtherInequality, placeResult } from './place-result';

export interface ReadCertificate {
	/** About the inequality's representative; says nothing when the check did not accept. */
	readonly finding: Finding;
	/** `NPA level 2`, `Explicit strategy, dimension 2`. */
	readonly label: string;
	readonly accepted: boolean;
	/** What it proves of the claimed normalisation, or why the check refused it; a sentence. */
	readonly note: string;
}

/**
 * Reads a strategy or certificate that somebody hands in (a result as the command line prints it),
 * and lets the independent check judge it in a solver thread. Writes nothing.
 * @throws ServiceError invalid with an issue of the field `certificate`: it can't be read, or is not
 *   of the claim's inequality; rate-limited or unavailable when the check could not run
 */
export async function readCertificate(
	ctx: GroupContext,
	claim: ClaimRow,
	text: string
): Promise<ReadCertificate> {
	const inequality =
		claim.inequalityId === null ? null : await findInequality(ctx.db.read, claim.inequalityId);
	if (!inequality) {
		throw refusal('This claim is not about an inequality, so that no certificate speaks of it.');
	}
	const result = readResult(text);
	const map = await place(result.problem, inequality);
	const check = await runCheck(result);
	const finding = certifiedFinding(result, check, inequality, map, claim.input.sense);
	const label = labelOf(result, finding.result.problem);
	if (!check.checked) {
		return { finding, label, accepted: false, note: `The check refuses it: ${check.reason}.` };
	}
	return { finding, label, accepted: true, note: noteOf(finding, claim, inequality) };
}

const refusal = (message: string) =>
	new ServiceError('invalid', message, [{ field: 'certificate', message }]);

function readResult(text: string): DoneResult {
	if (text.length > TASK_LIMITS.certificate) {
		const most = (TASK_LIMITS.certificate / 1e6).toLocaleString('en');
		throw refusal(`The certificate has more than ${most} MB: hand it in as a file instead.`);
	}
	let result: DoneResult;
	try {
		result = parseResult(parseJsonText(text));
	} catch (error) {
		if (error instanceof JsonTextError) {
			const message = `The certificate is not JSON. ${error.message}.`;
			const issue = { field: 'certificate', message, position: error.position };
			throw new ServiceError('invalid', message, [issue]);
		}
		const known = [ProblemError, ProblemLimitError, UnsolvedQuantityError];
		if (!known.some((kind) => error instanceof kind)) throw error;
		throw refusal(`The certificate can’t be read. ${error instanceof Error ? error.message : ''}`);
	}
	if (result.problem.constraints.length > 0) {
		throw refusal('This certificate is under constraints, the claim is not: certify it without.');
	}
	return result;
}

async function place(problem: Problem, inequality: InequalityRecord) {
	try {
		return await placeResult(problem, inequality);
	} catch (error) {
		if (error instanceof OtherInequality) throw refusal(error.message);
		throw error;
	}
}

/** A box of irrational entries is a behaviour up to a tolerance only. */
function boxDefect({ problem }: DoneResult, check: CheckOutcome): string | null {
	if (problem.quantity !== 'value' || problem.box.kind !== 'table') return null;
	if (!check.checked || check.exact !== null) return null;
	return 'the box has irrational entries, so that it is no exact behaviour; give fractions';
}

async function runCheck(result: DoneResult): Promise<CheckOutcome> {
	try {
		const check = await runShortTask((pool) => pool.verify(result));
		const defect = boxDefect(result, check);
		return defect === null ? check : { checked: false, reason: defect };
	} catch (error) {
		if (error instanceof ServiceError) throw error;
		if (error instanceof Error && ['AbortError', 'TimeoutError'].includes(error.name)) {
			throw refusal('The check was not done within its time: hand in a smaller certificate.');
		}
		throw error;
	}
}

function labelOf({ problem }: DoneResult, about: Problem): string {
	if (problem.quantity === 'value' && problem.box.kind === 'table') return 'Explicit box';
	if (about.quantity !== 'see-saw') return problemLabel(about);
	return problemLabel(about).replace(/^See-saw/, 'Explicit strategy');
}

/** What was proved, in the claim's normalisation, and whether that says anything on the claim. */
function noteOf(finding: Finding, claim: ClaimRow, inequality: InequalityRecord): string {
	const { check } = finding;
	if (!check?.checked) return '';
	const { lower, upper } = showSides(mapSides(readMap(claim), check));
	const exact = check.exact !== null && parseRational(check.exact) !== null && lower === upper;
	const sides = exact
		? `exactly ${lower}`
		: [lower && `at least ${lower}`, upper && `at most ${upper}`].filter(Boolean).join(' and ');
	const proved = sides
		? `Proves that ${soughtLabel(finding.result.problem)} is ${sides}, in the claim’s normalisation`
		: 'Proves neither side';
	const claimed = quantityProblem(claim.input, readQuantity(claim.input), inequality, 1);
	const silent =
		'problem' in claimed &&
		evidenceOfFinding(finding, claimed.problem, IDENTITY_MAP).length === 0 &&
		`it says nothing on the claimed quantity (${claim.quantityLabel})`;
	return `${[proved, silent, `check: ${check.method}`].filter(Boolean).join('; ')}.`;
}
