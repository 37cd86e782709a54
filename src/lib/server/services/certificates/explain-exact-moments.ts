import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted, entries, triangle } from './counted';
import { MOMENT_PROOF, momentFields } from './explain-moments';

/** What is read of a dual multiplier in whole numbers over one denominator. */
export interface ExactMoments {
	readonly kind: 'npa-exact';
	readonly monomials: readonly unknown[];
	readonly denominator: number | string;
	readonly rowMultipliers: Readonly<Record<string, number | string>>;
	readonly constraintMultipliers: readonly unknown[];
	readonly moments: readonly unknown[] | null;
}

export function explainExactMoments(certificate: ExactMoments): CertificateExplanation {
	const { kind, monomials, rowMultipliers, constraintMultipliers } = certificate;
	const [products, feasible] = momentFields(certificate);
	return {
		kind,
		title: 'Exact dual multiplier of a moment-matrix relaxation',
		claims:
			'No behaviour of this relaxation, and so no quantum behaviour, exceeds the bound (falls below it, for a minimum). The bound is a fraction, and its proof is exact.',
		fields: [
			...(products ? [products] : []),
			{
				name: 'denominator',
				what: 'The whole number N that every multiplier is divided by, a power of two.',
				size: 'one number',
				numbers: 'exact'
			},
			{
				name: 'multiplier',
				what: 'The symmetric matrix M of whole numbers, row by row; Z = M / N.',
				size: triangle(monomials.length),
				numbers: 'exact'
			},
			{
				name: 'rowMultipliers',
				what: 'N times the multiplier z ≥ 0 of each row P ≥ 0 that was imposed, by "a,b|x,y".',
				size: entries(rowMultipliers),
				numbers: 'exact'
			},
			{
				name: 'constraintMultipliers',
				what: 'N times a multiplier for each constraint of the problem.',
				size: counted(constraintMultipliers.length, 'number'),
				numbers: 'exact'
			},
			{
				name: 'shift',
				what: 'M + shift × 1 is positive semidefinite; the bound contains shift / N times the number of rows.',
				size: 'one number',
				numbers: 'exact'
			},
			{
				name: 'bound',
				what: 'The guaranteed bound as a fraction.',
				size: 'one fraction',
				numbers: 'exact'
			},
			...(feasible ? [feasible] : [])
		],
		proof: [
			...MOMENT_PROOF,
			'The whole numbers are adjusted so that the linear equalities hold exactly. M + shift × 1 ≥ 0 is proved by an LDLᵀ factorisation in integers, without a single rounding: its pivots are at least 0.'
		],
		parts: []
	};
}
