import type { CheckOutcome } from '../nonlocality/certificates/types';
import {
	ONE,
	ZERO,
	exactOfDouble,
	parseRational,
	type Rational
} from '../nonlocality/exact/rational';
import type { DoneResult, Problem } from '../nonlocality/problem';
import { isEnumerated } from '../nonlocality/scenario/problem-functional';
import type { OtherValue } from './diagnosis';
import type { Evidence } from './enclosure';
import { methodMatches } from './method';
import { isWithin, sameQuantity } from './nesting';
import { fieldsOf, innerLabel, outerLabel, valueLabel } from './problem-labels';

/**
 * What a reader sees of a finished result: its problem stands elsewhere, and of its certificate,
 * which may be megabytes, only what names the evidence.
 */
export interface ResultSummary extends Omit<DoneResult, 'problem' | 'certificate'> {
	readonly certificate: { readonly kind: string; readonly upperLevel?: unknown } | null;
}

export function summaryOf({ problem: _, certificate, ...result }: DoneResult): ResultSummary {
	if (!certificate) return { ...result, certificate };
	const { kind } = certificate;
	const level = kind === 'enclosure' ? { upperLevel: certificate.upperLevel } : {};
	return { ...result, certificate: { kind, ...level } };
}

/** A finished recomputation with what its certificate check proved (null: there is no certificate). */
export interface Finding {
	readonly result: ResultSummary & Pick<DoneResult, 'problem'>;
	readonly check: CheckOutcome | null;
}

/** Value in the claim's normalisation = scale * value of the problem + shift; scale is positive. */
export interface AffineMap {
	readonly scale: Rational;
	readonly shift: Rational;
}

export const IDENTITY_MAP: AffineMap = { scale: ONE, shift: ZERO };

interface Sides {
	readonly lower: Rational | null;
	readonly upper: Rational | null;
}

const NOTHING: Sides = { lower: null, upper: null };
const ofDouble = (x: number | null) => (x === null ? null : exactOfDouble(x));

/** What the check proved, in the problem's normalisation. */
function provedSides({ result, check }: Finding): Sides {
	if (!check?.checked) return NOTHING;
	const exact = check.exact === null ? null : parseRational(check.exact);
	if (exact) return { lower: exact, upper: exact };
	const proved = { lower: ofDouble(check.lower), upper: ofDouble(check.upper) };
	return isEnumerated(result.problem) ? withEnumeration(result, proved) : proved;
}

/** A check repeats a small enumeration only: the side of a large one rests on the solver's own. */
function withEnumeration({ exact, lower, upper, guaranteed }: ResultSummary, proved: Sides): Sides {
	const value = exact === null ? null : parseRational(exact);
	return {
		lower: proved.lower ?? (guaranteed.lower ? (value ?? ofDouble(lower)) : null),
		upper: proved.upper ?? (guaranteed.upper ? (value ?? ofDouble(upper)) : null)
	};
}

/** What the solver says without proof: sides it does not guarantee, or a value with its tolerance. */
function numericalSides({ result, check }: Finding): Sides {
	if (check && !check.checked) return NOTHING;
	const { value, tolerance, guaranteed } = result;
	if (value !== null && tolerance !== null && tolerance > 0) {
		const [middle, margin] = [exactOfDouble(value), exactOfDouble(tolerance)];
		return { lower: middle.sub(margin), upper: middle.add(margin) };
	}
	return {
		lower: guaranteed.lower ? null : ofDouble(result.lower),
		upper: guaranteed.upper ? null : ofDouble(result.upper)
	};
}

function mapSides({ lower, upper }: Sides, { scale, shift }: AffineMap): Sides {
	const map = (x: Rational | null) => x && x.mul(scale).add(shift);
	return scale.s < 0n
		? { lower: map(upper), upper: map(lower) }
		: { lower: map(lower), upper: map(upper) };
}

/**
 * What one finished recomputation says about a claimed quantity of the same functional: the sides
 * that hold for it because the sets are nested. A recomputation whose certificate the check refused
 * says nothing.
 */
export function evidenceOfFinding(
	finding: Finding,
	claimed: Problem,
	map: AffineMap
): readonly Evidence[] {
	const { problem } = finding.result;
	const innerHolds = isWithin(problem, claimed);
	const outerHolds = isWithin(claimed, problem);
	const lowerHolds = problem.sense === 'max' ? innerHolds : outerHolds;
	const upperHolds = problem.sense === 'max' ? outerHolds : innerHolds;
	const labels =
		problem.sense === 'max'
			? { lowerLabel: innerLabel(problem), upperLabel: outerLabelOf(finding) }
			: { lowerLabel: outerLabelOf(finding), upperLabel: innerLabel(problem) };
	const evidence = (worth: Evidence['worth'], sides: Sides): Evidence[] => {
		const { lower, upper } = mapSides(
			{ lower: lowerHolds ? sides.lower : null, upper: upperHolds ? sides.upper : null },
			map
		);
		return lower || upper ? [{ worth, lower, upper, ...labels }] : [];
	};
	return [
		...evidence('guaranteed', provedSides(finding)),
		...evidence('numerical', numericalSides(finding))
	];
}

/** The level that a quantum enclosure's outer side belongs to, when its certificate says so. */
function outerLabelOf({ result }: Finding): string {
	const { certificate, problem } = result;
	const level = certificate?.upperLevel;
	return typeof level === 'number' || typeof level === 'string'
		? `NPA level ${level}`
		: outerLabel(problem);
}

/** A see-saw finds a value from one side only; another run rarely finds one this much better. */
const SEARCH_TOLERANCE = exactOfDouble(1e-7);

/**
 * A recomputation's own value as something a claim may have meant. A see-saw's best value stands for
 * the maximum in its dimension, and is labelled as found, not as proved.
 */
export function valueOfFinding(
	finding: Finding,
	map: AffineMap
): Omit<OtherValue, 'matchesMethod'> {
	const { problem } = finding.result;
	const sides = mapSides(valueSides(finding), map);
	return { label: valueLabel(problem), ...fieldsOf(problem), ...sides };
}

/** The values of other quantities of the same functional, for the diagnosis. */
export function othersOfFindings(
	findings: readonly Finding[],
	claimed: Problem,
	map: AffineMap,
	method: string
): readonly OtherValue[] {
	return findings
		.filter(({ result }) => !sameQuantity(result.problem, claimed))
		.filter(({ result: { problem } }) => maySubstitute(problem, claimed))
		.map((finding) => ({
			...valueOfFinding(finding, map),
			matchesMethod: methodMatches(method, finding.result.problem)
		}))
		.filter(({ lower, upper }) => lower !== null && upper !== null);
}

/** A maximum is offered for a claimed minimum, or the other way, only for the same set. */
function maySubstitute(problem: Problem, claimed: Problem): boolean {
	return problem.sense === claimed.sense || problem.quantity === claimed.quantity;
}

/** The proved exact value of a quantity among the findings, in the problem's normalisation. */
export function exactValueOf(
	findings: readonly Finding[],
	quantity: Problem['quantity']
): Rational | null {
	for (const finding of findings) {
		if (finding.result.quantity !== quantity) continue;
		const { lower, upper } = provedSides(finding);
		if (lower && upper?.equals(lower)) return lower;
	}
	return null;
}

function valueSides(finding: Finding): Sides {
	const proved = provedSides(finding);
	if (proved.lower && proved.upper) return proved;
	const { problem } = finding.result;
	if (problem.quantity === 'see-saw') {
		const { lower, upper } = proved;
		if (lower) return { lower, upper: lower.add(SEARCH_TOLERANCE) };
		return upper ? { lower: upper.sub(SEARCH_TOLERANCE), upper } : proved;
	}
	// A relaxation without a feasible point is known from above only: its optimum may be far off.
	return proved;
}
