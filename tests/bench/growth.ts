import { measureAll } from './measure';
import { OURS, ourContenders } from './contenders';
import { randomProblem } from './instances';

export interface GrowthPoint {
	/** Rows of the moment matrix. */
	readonly n: number;
	readonly milliseconds: number;
}

const INPUTS = [3, 4, 5, 6, 7, 8];

/** The exponent b of milliseconds = a n^b, by least squares on logarithms. */
export function fitExponent(points: readonly GrowthPoint[]): number {
	const x = points.map(({ n }) => Math.log(n));
	const y = points.map(({ milliseconds }) => Math.log(milliseconds));
	const mean = (values: readonly number[]) => values.reduce((a, b) => a + b, 0) / values.length;
	const [meanX, meanY] = [mean(x), mean(y)];
	const covariance = mean(x.map((value, i) => (value - meanX) * ((y[i] ?? NaN) - meanY)));
	return covariance / mean(x.map((value) => (value - meanX) ** 2));
}

/** Time of the plain relaxation at 1+AB against n, for random k x k two-outcome functionals. */
export async function measureGrowth(seed: number, rounds: number): Promise<GrowthPoint[]> {
	const points: GrowthPoint[] = [];
	for (const inputs of INPUTS) {
		const problem = randomProblem(inputs, 2, '1+AB', seed);
		const wasm = ourContenders(problem, true).filter(({ name }) => name === OURS.wasm);
		const times = await measureAll(wasm, rounds);
		points.push({ n: (inputs + 1) ** 2, milliseconds: times.get(OURS.wasm) ?? NaN });
	}
	return points;
}
