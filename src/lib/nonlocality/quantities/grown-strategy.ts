import {
	complexZeros,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import type { SeededRandom } from '../linalg/seeded-random';
import { tensorFactors } from '../linalg/tensor-factors';
import {
	emptyMeasurement,
	isProjective,
	randomVector,
	tidyMeasurement,
	type Measurement,
	type SeeSawStrategy
} from './see-saw-strategy';

/**
 * A strategy in larger local dimensions: the old one on the first basis vectors of each party,
 * random elements on the new ones, the whole shaken by about `perturbation`.
 * @param dimensions of each party, none smaller than before
 */
export function paddedStrategy(
	old: SeeSawStrategy,
	dimensions: readonly number[],
	perturbation: number,
	random: SeededRandom
): SeeSawStrategy {
	const total = dimensions.reduce((product, d) => product * d, 1);
	const state = embeddedState(old, dimensions, total);
	shake(state, perturbation / Math.sqrt(total), random);
	scaleComplex(state, 1 / Math.sqrt(squaredNorm(state)));
	const measurements = old.measurements.map((row, party) => {
		const [before, after] = [old.dimensions[party] ?? 1, dimensions[party] ?? 1];
		return row.map((source) => {
			const padded = paddedMeasurement(source, before, after, random);
			shake(padded.basis, perturbation / Math.sqrt(after), random);
			tidyMeasurement(padded, after);
			return padded;
		});
	});
	return { real: old.real, dimensions, factors: tensorFactors(dimensions), state, measurements };
}

function embeddedState(old: SeeSawStrategy, dimensions: readonly number[], total: number) {
	const state = complexZeros(total, old.real);
	for (let from = 0; from < old.state.re.length; from++) {
		let to = 0;
		old.factors.forEach(({ right, size }, party) => {
			to = to * (dimensions[party] ?? 1) + (Math.floor(from / right) % size);
		});
		state.re[to] = old.state.re[from] ?? 0;
		if (state.im) state.im[to] = old.state.im?.[from] ?? 0;
	}
	return state;
}

/** Old vectors first, then random ones on the new dimensions, as many as the kind of frame needs. */
function paddedMeasurement(
	source: Measurement,
	before: number,
	after: number,
	random: SeededRandom
): Measurement {
	const { outputs, labels, basis } = source;
	const real = basis.im === null;
	const each = isProjective(source, before) ? 1 : outputs;
	const fresh = each * (after - before);
	const padded = emptyMeasurement(outputs, labels.length + fresh, after, real);
	const into = padded.basis;
	labels.forEach((label, k) => {
		padded.labels[k] = label;
		const part = (array: Float64Array) => array.subarray(k * before, (k + 1) * before);
		into.re.set(part(basis.re), k * after);
		if (into.im && basis.im) into.im.set(part(basis.im), k * after);
	});
	for (let k = labels.length; k < labels.length + fresh; k++) {
		padded.labels[k] = random.integer(outputs);
		const vector = randomVector(after - before, real, random);
		into.re.set(vector.re, k * after + before);
		if (into.im && vector.im) into.im.set(vector.im, k * after + before);
	}
	return padded;
}

function shake({ re, im }: ComplexArray, by: number, random: SeededRandom) {
	for (let i = 0; i < re.length; i++) re[i] = (re[i] ?? 0) + by * random.normal();
	if (im) for (let i = 0; i < im.length; i++) im[i] = (im[i] ?? 0) + by * random.normal();
}
