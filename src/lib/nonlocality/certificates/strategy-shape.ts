/** Reads a strategy that may come from any JSON: every number finite, every list of its length. */
import { outputCount, type Scenario } from '../scenario/scenario';
import type { StrategyCertificate } from './types';

/** A complex matrix or vector, row-major. */
export interface Entries {
	readonly re: Float64Array;
	readonly im: Float64Array;
}

export interface ReadMeasurement {
	readonly outputs: number;
	/** Elements as given, one per output. */
	readonly elements: readonly Entries[];
	/** Basis vectors (row k the k-th) and their outputs, for a projective strategy. */
	readonly basis: Entries | null;
	readonly labels: readonly number[];
}

export interface ReadStrategy {
	readonly dimensions: readonly number[];
	readonly state: Entries;
	readonly measurements: readonly (readonly ReadMeasurement[])[];
}

/** Entries of the state that are checked at most. */
const STATE_LIMIT = 2 ** 14;

export class ShapeError extends Error {}

function listOf(value: unknown, length: number, what: string): readonly unknown[] {
	if (!Array.isArray(value) || value.length !== length)
		throw new ShapeError(`${what} is not a list of ${length}`);
	return value;
}

function fieldsOf(value: unknown, what: string): Readonly<Record<string, unknown>> {
	if (typeof value !== 'object' || value === null) throw new ShapeError(`${what} is missing`);
	return { ...value };
}

function readComplex(value: unknown, into: Entries, at: number, what: string): void {
	const [re, im] = listOf(value, 2, `an entry of ${what}`);
	if (typeof re !== 'number' || typeof im !== 'number' || !Number.isFinite(re + im))
		throw new ShapeError(`an entry of ${what} is no finite number`);
	into.re[at] = re;
	into.im[at] = im;
}

function readVector(value: unknown, length: number, what: string): Entries {
	const entries = { re: new Float64Array(length), im: new Float64Array(length) };
	listOf(value, length, what).forEach((entry, i) => readComplex(entry, entries, i, what));
	return entries;
}

function readMatrix(value: unknown, size: number, what: string): Entries {
	const entries = { re: new Float64Array(size * size), im: new Float64Array(size * size) };
	listOf(value, size, what).forEach((row, i) => {
		listOf(row, size, `a row of ${what}`).forEach((entry, j) =>
			readComplex(entry, entries, i * size + j, what)
		);
	});
	return entries;
}

/** @throws ShapeError with the place of the first defect. */
export function readStrategy(scenario: Scenario, certificate: StrategyCertificate): ReadStrategy {
	const parties = scenario.outputs.length;
	const given = fieldsOf(certificate.strategy, 'the strategy');
	const dimensions = listOf(given['dimensions'], parties, 'dimensions').map((d) => {
		if (typeof d !== 'number' || !Number.isInteger(d) || d < 1)
			throw new ShapeError('a dimension is no whole number of at least 1');
		return d;
	});
	const total = dimensions.reduce((product, d) => product * d, 1);
	if (total > STATE_LIMIT)
		throw new ShapeError(
			`a state of ${total} entries is more than the ${STATE_LIMIT} checked here`
		);
	const state = readVector(given['state'], total, 'the state');
	const perParty = listOf(given['measurements'], parties, 'measurements');
	const bases = certificate.projective ? listOf(certificate.bases, parties, 'bases') : null;
	const measurements = scenario.outputs.map((counts, party) => {
		const size = dimensions[party] ?? 1;
		const own = listOf(perParty[party], counts.length, `the measurements of party ${party}`);
		const ownBases = bases && listOf(bases[party], counts.length, `the bases of party ${party}`);
		return counts.map((_, input): ReadMeasurement => {
			const what = `party ${party}, input ${input}`;
			const outputs = outputCount(scenario, party, input);
			const elements = listOf(own[input], outputs, `the elements of ${what}`).map((element) =>
				readMatrix(element, size, `an element of ${what}`)
			);
			if (!ownBases) return { outputs, elements, basis: null, labels: [] };
			const basis = fieldsOf(ownBases[input], `the basis of ${what}`);
			const labels = listOf(basis['outputs'], size, `the outputs of the basis of ${what}`);
			return {
				outputs,
				elements,
				basis: readMatrix(basis['vectors'], size, `the basis of ${what}`),
				labels: labels.map((label) => {
					if (typeof label === 'number' && Number.isInteger(label) && label >= 0 && label < outputs)
						return label;
					throw new ShapeError(`a basis vector of ${what} belongs to no output`);
				})
			};
		});
	});
	return { dimensions, state, measurements };
}
