import type {
	ExactMomentCertificate,
	MomentCertificate
} from '../../src/lib/nonlocality/certificates/types';
import { parseRational, toDoubleUp } from '../../src/lib/nonlocality/exact/rational';

/** What rounding the multipliers to doubles again may cost. */
const ROUNDING = 1e-10;

/** The same multipliers as a certificate in doubles, as problems with irrational coefficients get. */
export function floatingCertificate(exact: ExactMomentCertificate): MomentCertificate {
	const { denominator, multiplier, rowMultipliers, constraintMultipliers, shift } = exact;
	const real = (whole: number | string) => Number(whole) / Number(denominator);
	const bound = parseRational(exact.bound);
	if (!bound) throw new Error(`${exact.bound} is no fraction`);
	return {
		kind: 'npa-dual',
		monomials: exact.monomials,
		multiplier: multiplier.map(real),
		rowMultipliers: Object.fromEntries(
			Object.entries(rowMultipliers).map(([key, value]) => [key, real(value)])
		),
		...(constraintMultipliers.length > 0 && {
			constraintMultipliers: constraintMultipliers.map(real)
		}),
		shift: real(shift),
		bound: toDoubleUp(bound) + ROUNDING,
		moments: exact.moments,
		feasibleValue: exact.feasibleValue
	};
}
