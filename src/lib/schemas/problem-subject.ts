import {
	familyFunctional,
	functionalOfTerms,
	parseCoefficient,
	parseCollinsGisin,
	parseCorrelators,
	parseExpression,
	parseProbabilities,
	printRational,
	rationalOfNumber,
	type Functional
} from '../nonlocality/notation';
import { ProblemError, ProblemLimitError, onField } from './problem-error';
import {
	FUNCTIONAL_FIELDS,
	PROBLEM_LIMITS,
	type CoefficientShape,
	type FunctionalShape
} from './problem-shape';

type Outputs = readonly (readonly number[])[];

/** The text of a coefficient: a JSON number is the decimal of its shortest form. */
export function coefficientText(value: CoefficientShape): string {
	return typeof value === 'string' ? value : printRational(rationalOfNumber(value));
}

/** A coefficient checked and in its normal form. */
export function readCoefficient(field: string, value: CoefficientShape): string {
	return onField(field, () => parseCoefficient(coefficientText(value)).text);
}

export function checkOutputs(field: string, outputs: Outputs): void {
	const limit = (most: number, what: string, found: number) => {
		if (found > most) throw new ProblemLimitError(field, `at most ${most} ${what}, not ${found}`);
	};
	limit(PROBLEM_LIMITS.parties, 'parties', outputs.length);
	for (const inputs of outputs) {
		limit(PROBLEM_LIMITS.inputs, 'inputs per party', inputs.length);
		limit(PROBLEM_LIMITS.outputs, 'outputs per input', Math.max(...inputs));
	}
	const entries = outputs.reduce(
		(product, inputs) => product * inputs.reduce((sum, count) => sum + count, 0),
		1
	);
	limit(PROBLEM_LIMITS.tableEntries, 'joint probabilities', entries);
}

/**
 * The functional of a subject or constraint in whichever notation it came, or null when there is
 * none. `prefix` precedes field names in errors.
 */
export function readFunctional(
	shape: FunctionalShape,
	outputs: Outputs | undefined,
	prefix = ''
): Functional | null {
	const given = FUNCTIONAL_FIELDS.filter((field) => shape[field] !== undefined);
	const [first, second] = given;
	if (second) throw new ProblemError(`${prefix}${second}`, `give only one of ${given.join(', ')}`);
	if (shape.indexBase !== undefined && first !== 'expression')
		throw new ProblemError(`${prefix}indexBase`, 'belongs to an expression only');
	if (!first) return null;
	const field = `${prefix}${first}`;
	const functional = readNotation(shape, outputs, field);
	if (outputs && JSON.stringify(outputs) !== JSON.stringify(functional.scenario.outputs))
		throw new ProblemError(
			prefix ? field : 'outputs',
			`${first} is for the outputs ${JSON.stringify(functional.scenario.outputs)}, not ${JSON.stringify(outputs)}`
		);
	if (functional.terms.length > PROBLEM_LIMITS.terms)
		throw tooManyTerms(field, functional.terms.length);
	checkExpansion(field, functional);
	return functional;
}

/** Collins-Gisin coordinates turn an event on a last output into as many terms as it has outputs. */
function checkExpansion(field: string, { scenario, terms }: Functional): void {
	const expanded = terms.reduce((sum, { events }) => {
		const counts = events.map(([party, input, output]) => {
			const count = scenario.outputs[party]?.[input] ?? 1;
			return output === count - 1 ? count : 1;
		});
		return sum + counts.reduce((product, count) => product * count, 1);
	}, 0);
	if (expanded > PROBLEM_LIMITS.expandedTerms)
		throw new ProblemLimitError(
			field,
			`at most ${PROBLEM_LIMITS.expandedTerms} terms without the last outputs, not ${expanded}`
		);
}

const tooManyTerms = (field: string, found: number) =>
	new ProblemLimitError(field, `at most ${PROBLEM_LIMITS.terms} terms, not ${found}`);

function readNotation(
	shape: FunctionalShape,
	outputs: Outputs | undefined,
	field: string
): Functional {
	const { terms, expression, family, collinsGisin, correlators, probabilities } = shape;
	if (terms) {
		if (!outputs)
			throw new ProblemError(
				'outputs',
				'is missing: terms need the number of outputs per party and input'
			);
		return readTerms(terms, outputs, field);
	}
	if (expression !== undefined)
		return onField(field, () => {
			const read = parseExpression(expression, {
				indexBase: shape.indexBase ?? 0,
				...(outputs && { outputs })
			});
			if (read.claimedBound)
				throw new ProblemError(field, 'holds a bound: enter the expression alone');
			return read.functional;
		});
	if (family)
		return onField(field, () => {
			const texts = Object.entries(family).map(([key, value]) => [
				key,
				typeof value === 'number' ? coefficientText(value) : value
			]);
			return familyFunctional({ ...Object.fromEntries(texts), name: family.name });
		});
	const cells = (table: readonly (readonly CoefficientShape[])[]) =>
		onField(field, () => table.map((row) => row.map(coefficientText)));
	if (collinsGisin) return onField(field, () => parseCollinsGisin(cells(collinsGisin), outputs));
	if (correlators) return onField(field, () => parseCorrelators(cells(correlators)));
	const entries = onField(field, () =>
		Object.entries(probabilities ?? {}).map(
			([key, value]) => [key, coefficientText(value)] as const
		)
	);
	if (entries.length > PROBLEM_LIMITS.terms) throw tooManyTerms(field, entries.length);
	return onField(field, () => parseProbabilities(Object.fromEntries(entries), outputs));
}

function readTerms(
	terms: NonNullable<FunctionalShape['terms']>,
	outputs: Outputs,
	field: string
): Functional {
	if (terms.length > PROBLEM_LIMITS.terms) throw tooManyTerms(field, terms.length);
	const read = terms.map(([coefficient, events], i) => {
		const seen = new Set<number>();
		events.forEach(([party, input, output], j) => {
			const at = `${field}[${i}][1][${j}]`;
			if (seen.has(party)) throw new ProblemError(at, `party ${party} occurs twice in one term`);
			seen.add(party);
			const inputs = outputs[party];
			const count = inputs?.[input];
			if (!inputs)
				throw new ProblemError(
					at,
					`there is no party ${party}: parties count from 0 to ${outputs.length - 1}`
				);
			if (count === undefined)
				throw new ProblemError(
					at,
					`party ${party} has no input ${input}: inputs count from 0 to ${inputs.length - 1}`
				);
			if (output >= count)
				throw new ProblemError(
					at,
					`input ${input} of party ${party} has no output ${output}: outputs count from 0 to ${count - 1}`
				);
		});
		return [readCoefficient(`${field}[${i}][0]`, coefficient), events] as const;
	});
	return onField(field, () => functionalOfTerms(outputs, read));
}
