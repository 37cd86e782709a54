/**
 * Re-checks a result from its problem and its certificate alone, without solving again.
 * Certificates speak about g (the functional maximised); the outcome speaks about the problem's own.
 */
import { parseRational, printRational, toDoubleDown, toDoubleUp } from '../exact/rational';
import type { DoneResult, Problem, Result } from '../problem';
import type { Functional } from '../scenario/functional';
import { functionalToMaximise, isEnumerated, turnsSigns } from '../scenario/problem-functional';
import { checkDeterministicStrategy } from './check-deterministic-strategy';
import { checkEnclosure } from './check-enclosure';
import { checkExactMoments } from './check-exact-moments';
import { checkFacet } from './check-facet';
import { checkHybrid } from './check-hybrid';
import { checkLinearProgramme } from './check-linear-programme';
import { checkLocalMixture } from './check-local-mixture';
import { checkMomentCertificate } from './check-moments';
import { checkStrategy } from './check-quantum-strategy';
import { checkValue } from './check-value';
import type { Certificate, CheckOutcome } from './types';

type Proved = Extract<CheckOutcome, { checked: true }>;

/** Never throws: a certificate that cannot be read is not checked, with the reason. */
export function verifyResult(result: Result): CheckOutcome {
	if (result.status !== 'done')
		return { checked: false, reason: `the result is not done: ${result.status}` };
	if (result.quantity !== result.problem.quantity)
		return {
			checked: false,
			reason: `the result says "${result.quantity}", its problem "${result.problem.quantity}"`
		};
	try {
		const g = functionalToMaximise(result.problem);
		const outcome = checkCertificate(result.problem, g, result.certificate);
		if (!outcome.checked) return outcome;
		const proved = turnsSigns(result.problem) ? turnSigns(outcome) : outcome;
		const defect = printedDefect(result, proved);
		return defect ? { checked: false, reason: defect } : proved;
	} catch (error) {
		const what = error instanceof Error ? error.message : String(error);
		return { checked: false, reason: `the certificate cannot be read: ${what}` };
	}
}

function checkCertificate(
	problem: Problem,
	g: Functional,
	certificate: Certificate | null
): CheckOutcome {
	if (problem.quantity === 'value') return checkValue(problem, g);
	if (!certificate) return refuse('the result carries no certificate');
	switch (certificate.kind) {
		case 'deterministic-strategy':
			if (problem.quantity === 'local' && problem.constraints.length > 0)
				return refuse('a strategy alone proves nothing on the maximum under constraints');
			if (problem.quantity === 'local') return checkDeterministicStrategy(g, certificate);
			break;
		case 'local-mixture':
			if (problem.quantity === 'local') return checkLocalMixture(problem, g, certificate);
			break;
		case 'linear-programme':
			if (problem.quantity === 'no-signalling')
				return checkLinearProgramme(problem, g, certificate);
			break;
		case 'quantum-strategy':
			if (problem.quantity === 'see-saw') return checkStrategy(problem, g, certificate);
			break;
		case 'npa-dual':
			if (problem.quantity === 'npa') return checkMomentCertificate(problem, g, certificate);
			break;
		case 'npa-exact':
			if (problem.quantity === 'npa') return checkExactMoments(problem, g, certificate);
			break;
		case 'enclosure':
			if (problem.quantity === 'quantum') return checkEnclosure(problem, g, certificate);
			break;
		case 'hybrid':
			if (problem.quantity === 'hybrid') return checkHybrid(problem, g, certificate);
			break;
		case 'facet':
			if (problem.quantity === 'facet') return checkFacet(g, certificate);
			break;
	}
	return refuse(
		`a certificate of the kind "${certificate.kind}" proves nothing on "${problem.quantity}"`
	);
}

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

/** A printed side may be looser than what is proved, never tighter. */
function printedDefect(result: DoneResult, proved: Proved): string | null {
	const { lower, upper, value, exact, tolerance } = result;
	const slack = tolerance ?? 0;
	const unproved = unprovedSide(result, proved);
	const exceeded = exceededStrategy(result);
	if (exceeded) return exceeded;
	if (unproved) return `the ${unproved} side is printed as guaranteed, but nothing proves it`;
	if (lower !== null && proved.lower !== null && lower > proved.lower)
		return `the printed lower side ${lower} is above the proved ${proved.lower}`;
	if (upper !== null && proved.upper !== null && upper < proved.upper)
		return `the printed upper side ${upper} is below the proved ${proved.upper}`;
	if (lower !== null && upper !== null && lower > upper)
		return `the printed lower side ${lower} is above the upper ${upper}`;
	if (value !== null && ((lower !== null && value < lower) || (upper !== null && value > upper)))
		return `the printed value ${value} is outside its own sides`;
	if (
		value !== null &&
		((proved.lower !== null && value + slack < proved.lower) ||
			(proved.upper !== null && value - slack > proved.upper))
	)
		return `the printed value ${value} is outside the proved sides`;
	if (exact === null) return null;
	if (proved.exact !== null)
		return exact === proved.exact ? null : `the exact value is ${proved.exact}, not ${exact}`;
	const read = parseRational(exact);
	if (!read) return `the exact value "${exact}" is no fraction`;
	if (
		(lower !== null && toDoubleDown(read) < lower) ||
		(upper !== null && toDoubleUp(read) > upper)
	)
		return `the exact value ${exact} is outside its own sides`;
	return null;
}

/** A large enumeration is not repeated: only there may a guaranteed side go unproved. */
function unprovedSide(result: DoneResult, proved: Proved): 'lower' | 'upper' | null {
	if (isEnumerated(result.problem)) return null;
	for (const side of ['lower', 'upper'] as const)
		if (result.guaranteed[side] && result[side] !== null && proved[side] === null) return side;
	return null;
}

/** A strategy near its constraints proves no side, but its value is what may be printed. */
function exceededStrategy({ problem, certificate, lower, upper }: DoneResult): string | null {
	if (certificate?.kind !== 'quantum-strategy') return null;
	const printed = turnsSigns(problem) ? (upper === null ? null : 0 - upper) : lower;
	return printed === null || printed <= certificate.value
		? null
		: `the printed side is beyond the strategy's value ${certificate.value}`;
}

function turnSigns(proved: Proved): Proved {
	const exact = proved.exact === null ? null : parseRational(proved.exact);
	const bound = proved.exactBound === undefined ? null : parseRational(proved.exactBound);
	return {
		...proved,
		lower: proved.upper === null ? null : 0 - proved.upper,
		upper: proved.lower === null ? null : 0 - proved.lower,
		exact: exact ? printRational(exact.neg()) : null,
		...(bound && { exactBound: printRational(bound.neg()) })
	};
}
