import type { StrategyCertificate } from '../../../nonlocality/certificates/types';
import type { CertificateExplanation } from '../../../schemas/certificate-view';
import { counted } from './counted';

export function explainQuantumStrategy({
	strategy,
	projective,
	violation
}: StrategyCertificate): CertificateExplanation {
	const { dimensions, state, measurements } = strategy;
	const inputs = measurements.reduce((sum, party) => sum + party.length, 0);
	return {
		kind: 'quantum-strategy',
		title: 'State and measurements',
		claims:
			'This quantum strategy reaches the value, so that the quantum maximum is at least that (at most, for a minimum).',
		fields: [
			{
				name: 'strategy.dimensions',
				what: 'The dimension of each party’s space.',
				size: dimensions.join(' × '),
				numbers: 'exact'
			},
			{
				name: 'strategy.state',
				what: 'A vector on the tensor product of the spaces, the first party most significant; each entry [re, im]. It is divided by its norm.',
				size: counted(state.length, 'amplitude'),
				numbers: 'floating point'
			},
			{
				name: 'strategy.measurements',
				what: 'measurements[party][input][output] is a matrix of [re, im].',
				size: counted(inputs, 'measurement'),
				numbers: 'floating point'
			},
			{
				name: 'bases',
				what: 'Of projective measurements: an orthonormal basis, and the output that each of its vectors belongs to.',
				size: projective ? 'one for each measurement' : 'left out',
				numbers: projective ? 'floating point' : 'none'
			},
			{
				name: 'value',
				what: 'What is guaranteed: the functional at the strategy less what rounding may have added.',
				size: 'one number',
				numbers: 'floating point'
			},
			...(violation === undefined
				? []
				: [
						{
							name: 'violation',
							what: 'No constraint of the problem is violated by more; above 0 the strategy is near the constraints, and proves no side.',
							size: String(violation),
							numbers: 'floating point'
						} as const
					])
		],
		proof: [
			'Each probability is the mean of the product of the outputs’ matrices in the state; the functional is their sum with its coefficients.',
			projective
				? 'The bases are orthonormal up to a defect ε = ‖V*V − 1‖. Exact projectors lie within a distance that ε bounds, which costs at most 4 N ε for each coefficient of N parties; it is taken off, and so is the rounding of the evaluation.'
				: 'The last matrix of each measurement is 1 minus the others, and each is proved at least 0 by a Cholesky factorisation with a proved bound on its rounding; the rounding of the evaluation is taken off.'
		],
		parts: []
	};
}
