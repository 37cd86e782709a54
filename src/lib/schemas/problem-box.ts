import {
	addCoefficients,
	behaviourOfStrategy,
	exactCoefficient,
	multiplyCoefficients,
	negateCoefficient,
	parseCoefficient,
	parseTableKey,
	scenarioOfKeys,
	tableKey,
	type Coefficient,
	type ComplexMatrix,
	type ComplexNumber,
	type Event,
	type ProblemBox,
	type QuantumStrategy
} from '../nonlocality/notation';
import { ratio } from '../nonlocality/exact/rational';
import { ProblemError, ProblemLimitError, onField } from './problem-error';
import {
	PROBLEM_LIMITS,
	type BoxShape,
	type CoefficientShape,
	type StartShape
} from './problem-shape';
import { coefficientText, readCoefficient } from './problem-subject';

type Outputs = readonly (readonly number[])[];

/** A box in its normal form, with the scenario it implies (null where it takes any). */
export function readBox(
	shape: BoxShape,
	outputs: Outputs | undefined
): { box: ProblemBox; outputs: Outputs } {
	if (isNormalised(shape)) {
		return shape.kind === 'quantum'
			? readQuantum(shape.strategy, outputs)
			: readTable(shape.probabilities, outputs);
	}
	if (!isFamily(shape)) return readTable(shape, outputs);
	switch (shape.family) {
		case 'isotropic':
			return isotropic(shape.d, shape.E);
		case 'quantum':
			return readQuantum(shape, outputs);
		case 'uniform':
			return uniform(needed(outputs));
		case 'deterministic':
			return deterministic(shape.strategy, needed(outputs));
	}
}

type FamilyShape = Extract<BoxShape, { family: string }>;
type NormalisedShape = Extract<BoxShape, { kind: string }>;
type TableShape = Exclude<BoxShape, FamilyShape | NormalisedShape>;

// The keys of a bare table are all of the form "a,b|x,y".
const isFamily = (shape: FamilyShape | TableShape): shape is FamilyShape => 'family' in shape;
const isNormalised = (shape: BoxShape): shape is NormalisedShape => 'kind' in shape;

function needed(outputs: Outputs | undefined): Outputs {
	if (outputs) return outputs;
	throw new ProblemError(
		'outputs',
		'is missing: this box needs the number of outputs per party and input'
	);
}

const table = (entries: readonly (readonly [string, string])[]): ProblemBox => ({
	kind: 'table',
	probabilities: Object.fromEntries(entries)
});

function readTable(
	entries: Readonly<Record<string, CoefficientShape>>,
	outputs: Outputs | undefined
) {
	const keys = Object.keys(entries);
	if (keys.length > PROBLEM_LIMITS.probabilities) throw tooLarge(keys.length);
	const scenario = outputs ?? onField('box', () => scenarioOfKeys(keys)).outputs;
	const read = Object.entries(entries).map(([key, value]) => {
		const field = `box[${JSON.stringify(key.slice(0, 40))}]`;
		const events = onField(field, () => parseTableKey(key));
		const inside =
			events.length === scenario.length &&
			events.every(([party, input, output]) => output < (scenario[party]?.[input] ?? 0));
		if (!inside)
			throw new ProblemError(field, `is outside the outputs ${JSON.stringify(scenario)}`);
		return [key, readCoefficient(field, value)] as const;
	});
	return { box: table(read), outputs: scenario };
}

const tooLarge = (found: number) =>
	new ProblemLimitError(
		'box',
		`at most ${PROBLEM_LIMITS.probabilities} probabilities, not ${found}`
	);

/** Every joint outcome of every tuple of inputs. */
function allEvents(outputs: Outputs): Event[][] {
	const size = outputs.reduce((product, inputs) => product * inputs.reduce((a, b) => a + b, 0), 1);
	if (size > PROBLEM_LIMITS.probabilities) throw tooLarge(size);
	return outputs.reduce<Event[][]>(
		(tuples, inputs, party) =>
			tuples.flatMap((tuple) =>
				inputs.flatMap((count, input) =>
					Array.from({ length: count }, (_, output): Event[] => [...tuple, [party, input, output]])
				)
			),
		[[]]
	);
}

/** Product of 1/outputs. */
function uniform(outputs: Outputs): { box: ProblemBox; outputs: Outputs } {
	const entries = allEvents(outputs).map((events) => {
		const product = events.reduce(
			(p, [party, input]) => p * BigInt(outputs[party]?.[input] ?? 1),
			1n
		);
		return [tableKey(events), `1/${product}`] as const;
	});
	return { box: table(entries), outputs };
}

/** strategy[party][input] = the output. */
function deterministic(strategy: Outputs, outputs: Outputs): { box: ProblemBox; outputs: Outputs } {
	const fits =
		strategy.length === outputs.length &&
		outputs.every((inputs, party) => {
			const replies = strategy[party] ?? [];
			return (
				replies.length === inputs.length &&
				inputs.every((count, x) => (replies[x] ?? count) < count)
			);
		});
	if (!fits)
		throw new ProblemError(
			'box.strategy',
			'must give one output per party and input, counted from 0'
		);
	const entries = allEvents(outputs).map((events) => {
		const happens = events.every(([party, input, output]) => strategy[party]?.[input] === output);
		return [tableKey(events), happens ? '1' : '0'] as const;
	});
	return { box: table(entries), outputs };
}

/** Largest d of an isotropic box: 2 d^3 probabilities. */
const LARGEST_D = 32;

/**
 * Inputs x in 0..d-1 and y in 0, 1; A + B = x y (mod d) with probability (1 + (d-1) E)/d, every other
 * sum with (1 - E)/d; uniform marginals.
 */
function isotropic(d: number, written: CoefficientShape): { box: ProblemBox; outputs: Outputs } {
	if (d > LARGEST_D) throw new ProblemLimitError('box.d', `at most ${LARGEST_D}, not ${d}`);
	const e = onField('box.E', () => parseCoefficient(coefficientText(written)));
	if (e.value > 1 || e.value < -1 / (d - 1))
		throw new ProblemError('box.E', 'must be from -1/(d-1) to 1');
	const whole = (n: number) => exactCoefficient(ratio(BigInt(n)));
	const share = (sum: Coefficient) =>
		multiplyCoefficients(sum, exactCoefficient(ratio(1n, BigInt(d * d)))).text;
	const right = share(addCoefficients(whole(1), multiplyCoefficients(whole(d - 1), e)));
	const wrong = share(addCoefficients(whole(1), negateCoefficient(e)));
	const outputs = [Array.from({ length: d }, () => d), [d, d]];
	const entries = allEvents(outputs).map((events) => {
		const [[, x, a], [, y, b]] = [events[0] ?? [0, 0, 0], events[1] ?? [0, 0, 0]];
		return [tableKey(events), (a + b) % d === (x * y) % d ? right : wrong] as const;
	});
	return { box: table(entries), outputs };
}

/** A complex number; exact forms become doubles here, as every quantum strategy is numerical. */
function readComplex(field: string, [re, im]: readonly CoefficientShape[]): ComplexNumber {
	const part = (value: CoefficientShape | undefined) => {
		if (typeof value === 'number' && Number.isFinite(value)) return value;
		return onField(field, () => parseCoefficient(coefficientText(value ?? 0))).value;
	};
	return [part(re), part(im)];
}

export function readState(
	field: string,
	state: readonly (readonly CoefficientShape[])[]
): ComplexNumber[] {
	const largest = PROBLEM_LIMITS.dimension ** PROBLEM_LIMITS.parties;
	if (state.length > Math.min(largest, PROBLEM_LIMITS.probabilities))
		throw new ProblemLimitError(field, `at most ${PROBLEM_LIMITS.probabilities} components`);
	const read = state.map((entry, i) => readComplex(`${field}[${i}]`, entry));
	if (read.every(([re, im]) => re === 0 && im === 0))
		throw new ProblemError(field, 'is the zero vector');
	return read;
}

interface StrategyShape {
	readonly state: readonly (readonly CoefficientShape[])[];
	/** [party][input][output][row][column] */
	readonly measurements: readonly (readonly (readonly (readonly (readonly (readonly CoefficientShape[])[])[])[])[])[];
}

function readQuantum(
	shape: StrategyShape,
	outputs: Outputs | undefined
): { box: ProblemBox; outputs: Outputs } {
	const read = readStrategy('box', shape, outputs, PROBLEM_LIMITS.dimension);
	return { box: { kind: 'quantum', strategy: read.strategy }, outputs: read.outputs };
}

/** The strategy that a search starts from. @throws ProblemError, ProblemLimitError naming `start` */
export function readStart(shape: StartShape, outputs: Outputs): QuantumStrategy {
	const given = 'strategy' in shape ? shape.strategy : shape;
	const { strategy } = readStrategy('start', given, outputs, PROBLEM_LIMITS.grow);
	onField('start', () => behaviourOfStrategy({ outputs }, strategy));
	return strategy;
}

function readStrategy(
	name: string,
	shape: StrategyShape,
	outputs: Outputs | undefined,
	largest: number
): { strategy: QuantumStrategy; outputs: Outputs } {
	const { measurements } = shape;
	const implied = measurements.map((inputs) => inputs.map((elements) => elements.length));
	if (
		implied.length === 0 ||
		implied.some((inputs) => inputs.length === 0 || inputs.some((n) => n < 2))
	)
		throw new ProblemError(
			`${name}.measurements`,
			'must hold at least two elements for every party and input'
		);
	if (outputs && JSON.stringify(outputs) !== JSON.stringify(implied))
		throw new ProblemError(
			`${name}.measurements`,
			`is for the outputs ${JSON.stringify(implied)}, not ${JSON.stringify(outputs)}`
		);
	const dimensions = measurements.map((inputs) => inputs[0]?.[0]?.length ?? 0);
	if (Math.max(...dimensions) > largest)
		throw new ProblemLimitError(
			`${name}.measurements`,
			`matrices are at most ${largest} by ${largest}`
		);
	const read = measurements.map((inputs, party) =>
		inputs.map((elements, input) =>
			elements.map((matrix, output): ComplexMatrix => {
				const field = `${name}.measurements[${party}][${input}][${output}]`;
				const d = dimensions[party] ?? 0;
				if (d === 0 || matrix.length !== d || matrix.some((row) => row.length !== d))
					throw new ProblemError(
						field,
						`must be a square matrix, of the same size for all of party ${party}`
					);
				return matrix.map((row, i) =>
					row.map((entry, j) => readComplex(`${field}[${i}][${j}]`, entry))
				);
			})
		)
	);
	const state = readState(`${name}.state`, shape.state);
	const size = dimensions.reduce((product, d) => product * d, 1);
	if (state.length !== size)
		throw new ProblemError(
			`${name}.state`,
			`must have ${dimensions.join(' x ')} = ${size} components, not ${state.length}`
		);
	return { strategy: { dimensions, state, measurements: read }, outputs: implied };
}
