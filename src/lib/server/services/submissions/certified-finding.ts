import type { Finding, ResultSummary } from '../../../ledger/evidence';
import type { Certificate, CheckOutcome } from '../../../nonlocality/certificates/types';
import { printRational, toDoubleDown, toDoubleUp } from '../../../nonlocality/exact/rational';
import type {
	DoneResult,
	Problem,
	ProblemBox,
	ProblemOf,
	ProblemTerm
} from '../../../nonlocality/problem';
import { largestDimensions } from '../../../nonlocality/scenario/local-dimensions';
import { mapSides, type AffineMap, type Sides } from '../inequalities/affine';

/** The inequality's representative, about which every stored value speaks. */
export interface Representative {
	readonly outputs: readonly (readonly number[])[];
	readonly terms: readonly ProblemTerm[];
}

/**
 * What the check proved of a result somebody handed in, said of the inequality's representative.
 * Nothing else of the result counts: its printed sides and values are a person's.
 * @param map value of the representative = scale * value of the result's functional + shift
 */
export function certifiedFinding(
	result: DoneResult,
	check: CheckOutcome,
	representative: Representative,
	map: AffineMap,
	/** Of a box, which end of the values its own is a bound of. */
	sense: Problem['sense']
): Finding {
	const problem = problemOf(result.problem, representative, sense);
	const isBox = result.quantity === 'value';
	const sides = check.checked ? sidesOf(check, map, isBox ? sense : null) : NO_SIDES;
	const { format, seconds, seed, solver } = result;
	const summary: ResultSummary = {
		format,
		quantity: problem.quantity,
		status: 'done',
		...sides,
		value: null,
		tolerance: null,
		optimum: null,
		guaranteed: { lower: sides.lower !== null, upper: sides.upper !== null },
		method: {},
		seconds,
		seed,
		solver,
		certificate: kindOf(result.certificate)
	};
	return {
		result: { ...summary, problem },
		check: check.checked ? { checked: true, ...sides, method: check.method } : check
	};
}

const NO_SIDES: Sides = { lower: null, upper: null, exact: null };

/**
 * Rounded outward where the map or a double can't say it exactly.
 * @param boxSense of a box the check proves its value: at most the maximum, at least the minimum
 */
function sidesOf(
	check: Extract<CheckOutcome, { checked: true }>,
	map: AffineMap,
	boxSense: Problem['sense'] | null
): Sides {
	const { lower, upper } = mapSides(map, check);
	const isExact = boxSense === null && check.exact !== null && lower && upper?.equals(lower);
	return {
		lower: lower && boxSense !== 'min' ? finite(toDoubleDown(lower)) : null,
		upper: upper && boxSense !== 'max' ? finite(toDoubleUp(upper)) : null,
		exact: isExact ? printRational(lower) : null
	};
}

export const finite = (value: number) => (Number.isFinite(value) ? value : null);

function kindOf(certificate: Certificate | null): ResultSummary['certificate'] {
	if (!certificate) return null;
	const { kind } = certificate;
	return { kind, ...(kind === 'enclosure' && { upperLevel: certificate.upperLevel }) };
}

/**
 * The same problem of the representative. Relabelling may exchange parties, so that dimensions which
 * differ become the largest for all, and a prescribed state any: less is said, and it stays proved.
 */
export function problemOf(
	problem: Problem,
	{ outputs, terms }: Representative,
	boxSense: Problem['sense']
): Problem {
	const { format, constraints, seconds, seed } = problem;
	const sense = problem.quantity === 'value' ? boxSense : problem.sense;
	const base = { format, outputs, terms, sense, constraints, seconds, seed };
	const alike = (dimensions: readonly number[]) => {
		const largest = Math.max(...dimensions);
		return outputs.map(() => largest);
	};
	switch (problem.quantity) {
		case 'value':
			return problemOfBox(problem.box, base, alike);
		case 'see-saw': {
			const dimensions = largestDimensions(problem, outputs.length);
			const same = new Set(dimensions).size === 1;
			const entangled = same && problem.state === 'maximally-entangled';
			return {
				...base,
				quantity: 'see-saw',
				dimension: alike(dimensions),
				starts: problem.starts,
				state: entangled ? 'maximally-entangled' : 'free'
			};
		}
		case 'npa': {
			const { level, nonNegative } = problem;
			return { ...base, quantity: 'npa', level, nonNegative };
		}
		case 'quantum': {
			const { levels, dimensions, gap } = problem;
			return { ...base, quantity: 'quantum', levels, dimensions, gap };
		}
		case 'hybrid':
			return { ...base, quantity: 'hybrid', model: problem.model };
		case 'local':
		case 'no-signalling':
		case 'facet':
			return { ...base, quantity: problem.quantity };
	}
}

/** A box is one of the set that the maximum is taken over. */
function problemOfBox(
	box: ProblemBox,
	base: Omit<ProblemOf<'local'>, 'quantity'>,
	alike: (dimensions: readonly number[]) => readonly number[]
): Problem {
	if (box.kind === 'quantum') {
		const dimension = alike(box.strategy.dimensions);
		return { ...base, quantity: 'see-saw', dimension, starts: 1, state: 'free' };
	}
	const isDeterministic = Object.values(box.probabilities).every((p) => p === '0' || p === '1');
	return { ...base, quantity: isDeterministic ? 'local' : 'no-signalling' };
}
