import type { ComplexMatrix, QuantumStrategy } from '../../src/lib/nonlocality/problem';

export function realMatrix(rows: readonly (readonly number[])[]): ComplexMatrix {
	return rows.map((row) => row.map((value) => [value, 0] as const));
}

/** Projectors on the eigenvectors of cos(angle) Z + sin(angle) X. */
export function qubitMeasurement(angle: number): ComplexMatrix[] {
	const [c, s] = [Math.cos(angle) / 2, Math.sin(angle) / 2];
	return [
		realMatrix([
			[0.5 + c, s],
			[s, 0.5 - c]
		]),
		realMatrix([
			[0.5 - c, -s],
			[-s, 0.5 + c]
		])
	];
}

/** The textbook's for 2 sqrt(2): a maximally entangled state, 0 and pi/2 against pi/4 and -pi/4. */
export const CHSH_STRATEGY: QuantumStrategy = {
	dimensions: [2, 2],
	state: [
		[Math.SQRT1_2, 0],
		[0, 0],
		[0, 0],
		[Math.SQRT1_2, 0]
	],
	measurements: [
		[qubitMeasurement(0), qubitMeasurement(Math.PI / 2)],
		[qubitMeasurement(Math.PI / 4), qubitMeasurement(-Math.PI / 4)]
	]
};
