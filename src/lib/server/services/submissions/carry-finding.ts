import type { Finding, ResultSummary } from '../../../ledger/evidence';
import { printRational, toDoubleDown, toDoubleUp } from '../../../nonlocality/exact/rational';
import { mapSides, type AffineMap, type Sides } from '../inequalities/affine';
import { finite, problemOf, type Representative } from './certified-finding';

/**
 * What was found of one functional, said of an equivalent one; proved sides are rounded outward, so
 * that they stay proved.
 * @param map value of the other = scale * value of the one + shift, exactly
 */
export function carryFinding(finding: Finding, to: Representative, map: AffineMap): Finding {
	const { problem, ...summary } = finding.result;
	const { check } = finding;
	const carried: ResultSummary = {
		...summary,
		...carrySides(map, summary),
		...carryValue(map, summary)
	};
	return {
		result: { ...carried, problem: problemOf(problem, to, problem.sense) },
		check: check?.checked ? { ...check, ...carrySides(map, check) } : check
	};
}

function carrySides(map: AffineMap, sides: Sides): Sides {
	const { lower, upper } = mapSides(map, sides);
	const isExact = sides.exact !== null && lower && upper?.equals(lower);
	return {
		lower: lower && finite(toDoubleDown(lower)),
		upper: upper && finite(toDoubleUp(upper)),
		exact: isExact ? printRational(lower) : null
	};
}

/** Rounding of what is numerical anyway, well below any tolerance of a solver. */
const ROUNDING = 2 ** -50;

function carryValue(
	{ scale, shift }: AffineMap,
	{ value, tolerance, optimum }: ResultSummary
): Pick<ResultSummary, 'value' | 'tolerance' | 'optimum'> {
	const [factor, constant] = [scale.high.valueOf(), shift.high.valueOf()];
	const at = (x: number | null) => (x === null ? null : finite(factor * x + constant));
	const moved = at(value);
	return {
		value: moved,
		tolerance:
			tolerance === null || moved === null
				? tolerance
				: finite(factor * tolerance + ROUNDING * (Math.abs(moved) + Math.abs(constant))),
		optimum: at(optimum)
	};
}
