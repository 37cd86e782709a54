import type {
	ExactMomentCertificate,
	MomentCertificate
} from '../../../nonlocality/certificates/types';
import type { CertificateExplanation, CertificateField } from '../../../schemas/certificate-view';
import { counted, entries, triangle } from './counted';

/** Fields that the floating and the exact certificate share. */
function momentFields(certificate: {
	readonly monomials: readonly unknown[];
	readonly moments: readonly unknown[] | null;
}): readonly CertificateField[] {
	const { monomials, moments } = certificate;
	return [
		{
			name: 'monomials',
			what: 'The products of projectors that label rows and columns: for each party a word of letters [input, output].',
			size: counted(monomials.length, 'product'),
			numbers: 'exact'
		},
		{
			name: 'moments, feasibleValue',
			what: 'Moments of one matrix that is positive, in the order of their first appearance, and the functional there: the relaxation itself is no lower. It says nothing of the quantum maximum.',
			size: moments ? counted(moments.length, 'moment') : 'left out',
			numbers: moments ? 'floating point' : 'none'
		}
	];
}

const MOMENT_PROOF = [
	'The moment matrix Γ has a row and a column for each product; its entry is the mean of the adjoint of one times the other. In quantum mechanics Γ is positive semidefinite, and each of its moments is at most 1 in size.',
	'So ⟨Γ, Z⟩ ≥ 0 for the positive semidefinite multiplier Z. Adding it to the functional cancels every free moment up to a residual, and leaves a constant: that constant, plus the sizes of all residuals, is the bound.'
];

export function explainMoments(certificate: MomentCertificate): CertificateExplanation {
	const { monomials, rowMultipliers, constraintMultipliers = [] } = certificate;
	const [products, feasible] = momentFields(certificate);
	return {
		kind: 'npa-dual',
		title: 'Dual multiplier of a moment-matrix relaxation',
		claims:
			'No behaviour of this relaxation, and so no quantum behaviour, exceeds the bound (falls below it, for a minimum).',
		fields: [
			...(products ? [products] : []),
			{
				name: 'multiplier',
				what: 'The symmetric matrix Z, row by row.',
				size: triangle(monomials.length),
				numbers: 'floating point'
			},
			{
				name: 'rowMultipliers',
				what: 'A multiplier z ≥ 0 of each row P ≥ 0 that was imposed, by "a,b|x,y".',
				size: entries(rowMultipliers),
				numbers: 'floating point'
			},
			{
				name: 'constraintMultipliers',
				what: 'A multiplier for each constraint of the problem.',
				size: entries({ ...constraintMultipliers }),
				numbers: constraintMultipliers.length > 0 ? 'floating point' : 'none'
			},
			{
				name: 'shift',
				what: 'The smallest eigenvalue of Z is at least minus this; the bound contains the shift times the number of rows.',
				size: 'one number',
				numbers: 'floating point'
			},
			{
				name: 'bound',
				what: 'The guaranteed bound, rounded outward.',
				size: 'one number',
				numbers: 'floating point'
			},
			...(feasible ? [feasible] : [])
		],
		proof: [
			...MOMENT_PROOF,
			'Z + shift × 1 ≥ 0 is proved by a Cholesky factorisation with a proved bound on its rounding; what rounding may have cost elsewhere is added to the bound. The doubles are taken as the exact numbers they are.'
		],
		parts: []
	};
}

export function explainExactMoments(certificate: ExactMomentCertificate): CertificateExplanation {
	const { monomials, denominator, rowMultipliers, constraintMultipliers, shift, bound } =
		certificate;
	const [products, feasible] = momentFields(certificate);
	const nonzero = (numbers: readonly (string | number)[]) =>
		counted(
			numbers.filter((number) => String(number) !== '0').length,
			'number other than 0',
			'numbers other than 0'
		);
	return {
		kind: 'npa-exact',
		title: 'Exact dual multiplier of a moment-matrix relaxation',
		claims:
			'No behaviour of this relaxation, and so no quantum behaviour, exceeds the bound (falls below it, for a minimum). Every step is exact.',
		fields: [
			...(products ? [products] : []),
			{
				name: 'denominator',
				what: 'A whole number N: every multiplier is a whole number over N.',
				size: String(denominator),
				numbers: 'exact'
			},
			{
				name: 'multiplier',
				what: 'The symmetric matrix N Z of whole numbers, row by row.',
				size: triangle(monomials.length),
				numbers: 'exact'
			},
			{
				name: 'rowMultipliers',
				what: 'N times a multiplier z ≥ 0 of each row P ≥ 0 that was imposed, by "a,b|x,y".',
				size: nonzero(Object.values(rowMultipliers)),
				numbers: 'exact'
			},
			{
				name: 'constraintMultipliers',
				what: 'N times a multiplier for each constraint of the problem.',
				size: nonzero(constraintMultipliers),
				numbers: 'exact'
			},
			{
				name: 'shift',
				what: 'N Z plus this on the diagonal is positive semidefinite; the bound contains shift / N times the number of rows.',
				size: String(shift),
				numbers: 'exact'
			},
			{
				name: 'bound',
				what: 'The bound as a fraction.',
				size: bound,
				numbers: 'exact'
			},
			...(feasible ? [feasible] : [])
		],
		proof: [
			...MOMENT_PROOF,
			'The bound is summed in fractions, and N Z + shift × 1 ≥ 0 is proved in whole numbers: nothing is rounded.'
		],
		parts: []
	};
}
