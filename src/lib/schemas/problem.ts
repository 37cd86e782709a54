import type { z } from 'zod';
import {
	behaviourOfStrategy,
	behaviourOfTable,
	largestDimensions,
	termsOfFunctional,
	type HybridModel,
	type Level,
	type Problem,
	type ProblemBox,
	type ProblemConstraint,
	type QuantumStrategy
} from '../nonlocality/notation';
import { readBox, readStart, readState } from './problem-box';
import { ProblemError, ProblemLimitError, UnsolvedQuantityError, onField } from './problem-error';
import { PROBLEM_LIMITS, problemShape, type ProblemShape } from './problem-shape';
import { checkOutputs, readCoefficient, readFunctional } from './problem-subject';

export { ProblemError, ProblemLimitError, UnsolvedQuantityError } from './problem-error';
export { PROBLEM_LIMITS } from './problem-shape';

/** Quantities of the format that no solver serves yet. */
const UNSOLVED_QUANTITIES = [
	'visibility',
	'efficiency',
	'information-causality',
	'information-causality-test',
	'guessing',
	'random-access-code'
] as const;

const SOLVED_QUANTITIES = [
	'value',
	'local',
	'no-signalling',
	'hybrid',
	'facet',
	'npa',
	'see-saw',
	'quantum'
] as const;

/** Quantities that extra linear constraints mean nothing to, or that no solver knows under them. */
const UNCONSTRAINED: readonly string[] = ['value', 'quantum', 'hybrid', 'facet'];

/** What a problem means when it does not say. */
export const PROBLEM_DEFAULTS = { seconds: 30, seed: 0, starts: 20, gap: 1e-8 } as const;

/**
 * Reads a problem as people and programs write it (families, expressions and tables included) into
 * its normal form. A normalised problem comes back as it is.
 * @throws ProblemError naming the field, ProblemLimitError, UnsolvedQuantityError.
 */
export function parseProblem(json: unknown): Problem {
	const shape = readShape(json);
	const { outputs, terms, box } = readSubject(shape);
	const common = {
		format: 1,
		outputs,
		terms,
		sense: shape.sense ?? 'max',
		constraints: readConstraints(shape, outputs),
		seconds: atMost('seconds', shape.seconds ?? PROBLEM_DEFAULTS.seconds, PROBLEM_LIMITS.seconds),
		seed: shape.seed ?? PROBLEM_DEFAULTS.seed
	} as const;
	const parties = outputs.length;
	switch (shape.quantity) {
		case 'value':
			if (!box)
				throw new ProblemError(
					'box',
					'is missing: the value of a functional needs a box or strategy'
				);
			return { ...common, quantity: 'value', box };
		case 'local':
		case 'no-signalling':
		case 'facet':
			return { ...common, quantity: shape.quantity };
		case 'hybrid':
			return { ...common, quantity: 'hybrid', model: readModel(shape, parties) };
		case 'npa':
			if (shape.level === undefined)
				throw new ProblemError('level', 'is missing: an NPA bound needs its level');
			return {
				...common,
				quantity: 'npa',
				level: readLevel('level', shape.level, parties),
				nonNegative: shape.nonNegative ?? false
			};
		case 'see-saw':
			return { ...common, quantity: 'see-saw', ...readSeeSaw(shape, outputs) };
		default:
			return {
				...common,
				quantity: 'quantum',
				levels: shape.levels?.map((level, i) => readLevel(`levels[${i}]`, level, parties)) ?? null,
				dimensions:
					shape.dimensions?.map((d, i) =>
						atMost(`dimensions[${i}]`, d, PROBLEM_LIMITS.dimension)
					) ?? null,
				gap: shape.gap ?? PROBLEM_DEFAULTS.gap,
				...(shape.within && { within: shape.within }),
				...(shape.start && { start: readStart(shape.start, outputs) })
			};
	}
}

function readShape(json: unknown): ProblemShape {
	if (typeof json !== 'object' || json === null || Array.isArray(json))
		throw new ProblemError('problem', 'must be an object');
	if ('quantity' in json && typeof json.quantity === 'string') checkQuantity(json.quantity);
	// Before anything walks through it: a list that is too long is not looked at.
	if ('terms' in json && Array.isArray(json.terms))
		atMost('terms', json.terms.length, PROBLEM_LIMITS.terms, 'terms');
	if ('constraints' in json && Array.isArray(json.constraints))
		atMost('constraints', json.constraints.length, PROBLEM_LIMITS.constraints, 'constraints');
	const read = problemShape.safeParse(json);
	if (read.success) return read.data;
	throw errorOfIssue(read.error.issues[0], json);
}

function checkQuantity(quantity: string): void {
	if (UNSOLVED_QUANTITIES.some((name) => name === quantity))
		throw new UnsolvedQuantityError(quantity);
	if (SOLVED_QUANTITIES.some((name) => name === quantity)) return;
	const names = [...SOLVED_QUANTITIES, ...UNSOLVED_QUANTITIES].join(', ');
	throw new ProblemError(
		'quantity',
		`${JSON.stringify(quantity.slice(0, 40))} is none of ${names}`
	);
}

function errorOfIssue(found: z.core.$ZodIssue | undefined, json: object): ProblemError {
	if (!found) return new ProblemError('problem', 'is malformed');
	const issue = chosenIssue(found);
	const field = issue.path.map(pathPart).join('').replace(/^\./, '');
	if (issue.code === 'unrecognized_keys') {
		const key = (issue.keys[0] ?? '').slice(0, 40);
		const known =
			field === '' ? `; a problem has ${Object.keys(problemShape.shape).join(', ')}` : '';
		return new ProblemError(field === '' ? key : `${field}.${key}`, `is not known here${known}`);
	}
	if (issue.code === 'invalid_key') {
		const message = issue.issues[0]?.message ?? issue.message;
		return new ProblemError(field, `is no key of this object: ${message}`);
	}
	return new ProblemError(
		field || 'problem',
		isMissing(json, issue.path) ? 'is missing' : issue.message
	);
}

function pathPart(key: PropertyKey): string {
	if (typeof key === 'number') return `[${key}]`;
	const name = String(key).slice(0, 40);
	return /^\w+$/.test(name) ? `.${name}` : `[${JSON.stringify(name)}]`;
}

/**
 * Of the ways a field can be given, the only one whose name (`family`, `kind`) is right says what is
 * wrong; where there is none such, the union's own message does.
 */
function chosenIssue(issue: z.core.$ZodIssue): z.core.$ZodIssue {
	if (issue.code !== 'invalid_union') return issue;
	const isNamed = (options: readonly z.core.$ZodIssue[]) =>
		options.every(({ path }) => path.length > 0 && path[0] !== 'family' && path[0] !== 'kind');
	const [only, second] = issue.errors.filter((options) => options.length > 0 && isNamed(options));
	const [first] = only ?? [];
	if (!first || second) return issue;
	return chosenIssue({ ...first, path: [...issue.path, ...first.path] });
}

/** Whether what the path leads to is not there. */
function isMissing(json: unknown, path: readonly PropertyKey[]): boolean {
	const [key, ...rest] = path;
	if (key === undefined || typeof json !== 'object' || json === null) return false;
	if (!Object.hasOwn(json, key)) return rest.length === 0;
	return isMissing(Object.getOwnPropertyDescriptor(json, key)?.value, rest);
}

function atMost(field: string, value: number, limit: number, what = ''): number {
	if (value <= limit) return value;
	throw new ProblemLimitError(field, `at most ${limit}${what && ` ${what}`}, not ${value}`);
}

function readSubject(shape: ProblemShape) {
	if (shape.outputs) checkOutputs('outputs', shape.outputs);
	const functional = readFunctional(shape, shape.outputs);
	if (!functional)
		throw new ProblemError(
			'terms',
			'is missing: give the functional as terms, expression, family, collinsGisin, correlators or probabilities'
		);
	const { outputs } = functional.scenario;
	checkOutputs('outputs', outputs);
	if (shape.box !== undefined && shape.quantity !== 'value')
		throw new ProblemError('box', `has no part in the quantity ${shape.quantity}`);
	const read = shape.box === undefined ? null : readBox(shape.box, outputs);
	if (read && JSON.stringify(read.outputs) !== JSON.stringify(outputs))
		throw new ProblemError(
			'box',
			`is for the outputs ${JSON.stringify(read.outputs)}, the functional for ${JSON.stringify(outputs)}`
		);
	if (read) checkBox(read.box, outputs);
	return { outputs, terms: termsOfFunctional(functional), box: read?.box ?? null };
}

/** A box that is no behaviour (negative, not normalised, signalling) is malformed. */
function checkBox(box: ProblemBox, outputs: Problem['outputs']): void {
	onField('box', () =>
		box.kind === 'table'
			? behaviourOfTable({ outputs }, box.probabilities)
			: behaviourOfStrategy({ outputs }, box.strategy)
	);
}

function readConstraints(shape: ProblemShape, outputs: Problem['outputs']): ProblemConstraint[] {
	const { constraints = [], quantity } = shape;
	if (constraints.length > 0 && UNCONSTRAINED.includes(quantity))
		throw new ProblemError('constraints', `have no part in the quantity ${quantity}`);
	return constraints.map((constraint, i) => {
		const prefix = `constraints[${i}].`;
		const functional = readFunctional(constraint, outputs, prefix);
		if (!functional) throw new ProblemError(`${prefix}terms`, 'is missing');
		return {
			terms: termsOfFunctional(functional),
			relation: constraint.relation,
			value: readCoefficient(`${prefix}value`, constraint.value)
		};
	});
}

function readModel({ model }: ProblemShape, parties: number): HybridModel {
	if (parties < 3)
		throw new ProblemError(
			'quantity',
			`hybrid needs three parties or more, not ${parties}`,
			null,
			'With two parties it is the local maximum: write "local".'
		);
	if (model === undefined)
		throw new ProblemError(
			'model',
			'is missing: "svetlichny" lets the parties of a group signal, "no-signalling" does not'
		);
	return model;
}

function readLevel(
	field: string,
	level: NonNullable<ProblemShape['level']>,
	parties: number
): Level {
	if (typeof level === 'number') return atMost(field, level, PROBLEM_LIMITS.level);
	if (level === '1+AB') {
		if (parties !== 2)
			throw new ProblemError(
				field,
				`1+AB is for two parties, not ${parties}`,
				null,
				'Write {"perParty": 1}.'
			);
		return level;
	}
	if ('perParty' in level)
		return { perParty: atMost(`${field}.perParty`, level.perParty, PROBLEM_LIMITS.level) };
	atMost(`${field}.products`, level.products.length, PROBLEM_LIMITS.products, 'products');
	const last = String.fromCharCode(64 + parties);
	const outside = level.products.findIndex((product) =>
		[...product].some((letter) => letter > last)
	);
	if (outside >= 0)
		throw new ProblemError(`${field}.products[${outside}]`, `names a party beyond ${last}`);
	return { products: level.products };
}

function readSeeSaw(shape: ProblemShape, outputs: Problem['outputs']) {
	const parties = outputs.length;
	const { dimension, state = 'free' } = shape;
	if (dimension === undefined)
		throw new ProblemError('dimension', 'is missing: a see-saw needs its local dimension');
	const dimensions =
		typeof dimension === 'number' ? Array.from({ length: parties }, () => dimension) : dimension;
	if (dimensions.length !== parties)
		throw new ProblemError(
			'dimension',
			`must be one number, or one for each of the ${parties} parties`
		);
	dimensions.forEach((d) => atMost('dimension', d, PROBLEM_LIMITS.dimension));
	const starts = atMost('starts', shape.starts ?? PROBLEM_DEFAULTS.starts, PROBLEM_LIMITS.starts);
	const common = { dimension: dimensions, starts, ...readGrowth(shape, dimensions, outputs) };
	if (typeof state === 'string') return { ...common, state };
	const size = dimensions.reduce((product, d) => product * d, 1);
	const vector = readState('state', state);
	if (vector.length !== size)
		throw new ProblemError(
			'state',
			`must have ${dimensions.join(' x ')} = ${size} components, not ${vector.length}`
		);
	return { ...common, state: vector };
}

/** How far the strategy of a see-saw may grow, and where it starts. */
function readGrowth(
	{ grow, start, state = 'free', constraints = [] }: ProblemShape,
	dimension: readonly number[],
	outputs: Problem['outputs']
): { grow?: number; start?: QuantumStrategy } {
	if (state !== 'free' && (grow ?? start) !== undefined)
		throw new ProblemError(
			grow === undefined ? 'start' : 'grow',
			'has no part where the state is given'
		);
	if (grow !== undefined) {
		if (constraints.length > 0) throw new ProblemError('grow', 'has no part with constraints');
		atMost('grow', grow, PROBLEM_LIMITS.grow);
		if (grow < Math.max(...dimension))
			throw new ProblemError('grow', `must be at least the dimension ${Math.max(...dimension)}`);
	}
	if (!start) return grow === undefined ? {} : { grow };
	const strategy = readStart(start, outputs);
	const largest = largestDimensions({ dimension, grow }, outputs.length);
	if (strategy.dimensions.some((d, party) => d > (largest[party] ?? 0)))
		throw new ProblemError(
			'start',
			`has the dimensions ${strategy.dimensions.join(' x ')}, the problem allows ${largest.join(' x ')}`,
			null,
			'Give a larger "dimension" or "grow".'
		);
	return { ...(grow !== undefined && { grow }), start: strategy };
}
