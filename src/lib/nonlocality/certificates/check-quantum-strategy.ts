/**
 * Check of an explicit quantum strategy: its value is re-evaluated from the matrices in the
 * certificate, less an allowance for everything that is not exact. Shares no code with the solver.
 */
import { nextDouble } from '../exact/rational';
import type { Problem } from '../problem';
import { constraintForm } from '../scenario/constraint-form';
import type { Functional } from '../scenario/functional';
import { largestDimensions } from '../scenario/local-dimensions';
import { basisDefect, gamma, provePositive, showsItsBasis } from './measurement-defect';
import {
	generalProbabilities,
	projectiveProbabilities,
	squaredLength
} from './strategy-probability';
import { ShapeError, readStrategy, type Entries, type ReadStrategy } from './strategy-shape';
import type { CheckOutcome, StrategyCertificate } from './types';

const UNIT_ROUNDOFF = 2 ** -53;
/** The first-order bounds below hold while the measurements are this near to exact ones. */
const FIRST_ORDER = 0.1;
/** Real multiplications: some seconds. */
const WORK_LIMIT = 2 ** 31;
/** A prescribed state must be met to this distance; what is left of it enters the allowance. */
const STATE_TOLERANCE = 1e-9;

/**
 * A strategy counts when no constraint is violated by more than this share of its coefficients,
 * rounding included: rounding alone leaves some 1e-13.
 */
const CONSTRAINT_TOLERANCE = 1e-9;

interface Evaluation {
	readonly probability: (events: Functional['terms'][number]['events']) => number;
	/** |P as computed - P of an exact strategy| is at most this. */
	readonly allowance: number;
	readonly method: string;
}

/**
 * Under constraints `lower` is proved only where all are inequalities that provably hold; equations
 * hold to rounding at best, so there the check confirms value and violation, and proves no side.
 *
 * Proves `lower`: an exact strategy within the allowance of the given one has a value of at least
 * that. Accepts the certificate when that is no less than the value it prints.
 */
export function checkStrategy(
	problem: Problem,
	g: Functional,
	certificate: StrategyCertificate
): CheckOutcome {
	try {
		return evaluate(problem, g, certificate);
	} catch (error) {
		if (error instanceof ShapeError) return refuse(error.message);
		throw error;
	}
}

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

function evaluate(problem: Problem, g: Functional, certificate: StrategyCertificate): CheckOutcome {
	if (typeof certificate.value !== 'number' || !Number.isFinite(certificate.value))
		return refuse('the value of the strategy is no finite number');
	if (typeof certificate.projective !== 'boolean')
		return refuse('"projective" is neither true nor false');
	const strategy = readStrategy(g.scenario, certificate);
	const norm = squaredLength(strategy.state);
	// Far from 1 the squares could overflow or lose digits; solvers normalise.
	if (!(norm > 0.25 && norm < 4)) return refuse('the state is far from normalised');
	const distance = prescribedDistance(problem, strategy);
	if (typeof distance === 'string') return refuse(distance);
	const evaluation = certificate.projective
		? projectiveEvaluation(g, strategy)
		: generalEvaluation(g, strategy);
	if (typeof evaluation === 'string') return refuse(evaluation);

	const { lower } = enclose(g, evaluation, distance);
	if (!(lower >= certificate.value))
		return refuse(`the strategy is proved to reach ${lower}, not ${certificate.value}`);
	const { method } = evaluation;
	if (problem.constraints.length === 0)
		return { checked: true, lower, upper: null, exact: null, method };
	const printed = certificate.violation;
	if (typeof printed !== 'number' || !(printed >= 0))
		return refuse('the certificate does not say how far constraints are violated');
	const found = violationOf(problem, g, evaluation, distance);
	if (typeof found === 'string') return refuse(found);
	if (!(found <= printed))
		return refuse(`constraints are proved to hold within ${found}, not within ${printed}`);
	return found === 0
		? { checked: true, lower, upper: null, exact: null, method: `${method}, constraints proved` }
		: {
				checked: true,
				lower: null,
				upper: null,
				exact: null,
				method: `${method}: it reaches ${lower} and meets the constraints within ${found}, which proves nothing on the problem itself`
			};
}

/** Bounds on a form's value at an exact strategy within the allowance of the given one. */
function enclose(
	form: Functional,
	evaluation: Evaluation,
	distance: number
): { lower: number; upper: number } {
	let value = 0;
	let weight = 0;
	let errors = 0;
	for (const { coefficient, events } of form.terms) {
		value += coefficient.value * evaluation.probability(events);
		weight += Math.abs(coefficient.value);
		errors += coefficient.error;
	}
	const sums = gamma(form.terms.length + 4);
	const allowance = weight * (evaluation.allowance + 2 * distance + sums) + errors;
	// 1.01 covers the roundings of the allowance itself and the second order.
	return {
		lower: nextDouble(value - 1.01 * allowance, -1),
		upper: nextDouble(value + 1.01 * allowance, 1)
	};
}

/** The largest violation of any constraint, 0 when all hold; in words when one is violated. */
function violationOf(
	problem: Problem,
	g: Functional,
	evaluation: Evaluation,
	distance: number
): number | string {
	let worst = 0;
	for (const [place, constraint] of problem.constraints.entries()) {
		const { form, equality } = constraintForm(g.scenario, constraint);
		const { lower, upper } = enclose(form, evaluation, distance);
		const violation = equality ? Math.max(Math.abs(lower), Math.abs(upper)) : Math.max(0, upper);
		const unit = form.terms.reduce((sum, { coefficient: c }) => sum + Math.abs(c.value), 0);
		if (!(violation <= CONSTRAINT_TOLERANCE * Math.max(1, unit)))
			return `constraint ${place} is violated by up to ${violation}`;
		worst = Math.max(worst, violation);
	}
	return worst;
}

/** The problem's own conditions: local dimensions, and the distance to a prescribed state. */
function prescribedDistance(problem: Problem, strategy: ReadStrategy): number | string {
	if (problem.quantity !== 'see-saw') return 0;
	const { dimensions } = strategy;
	const allowed = largestDimensions(problem, dimensions.length);
	if (dimensions.some((d, p) => d > (allowed[p] ?? 0)))
		return `the strategy has dimensions ${dimensions.join(' x ')}, the problem allows ${allowed.join(' x ')}`;
	if (problem.state === 'free') return 0;
	if (dimensions.some((d, p) => d !== allowed[p]))
		return 'the strategy does not have the dimensions of the prescribed state';
	const wanted = prescribedState(problem.state, dimensions);
	if (!wanted) return 'the prescribed state does not fit the dimensions';
	const [own, their] = [Math.sqrt(squaredLength(strategy.state)), Math.sqrt(squaredLength(wanted))];
	let square = 0;
	for (let i = 0; i < wanted.re.length; i++) {
		square += ((strategy.state.re[i] ?? 0) / own - (wanted.re[i] ?? 0) / their) ** 2;
		square += ((strategy.state.im[i] ?? 0) / own - (wanted.im[i] ?? 0) / their) ** 2;
	}
	const distance = Math.sqrt(square) + gamma(4 * wanted.re.length + 8);
	return distance <= STATE_TOLERANCE ? distance : 'the state is not the prescribed one';
}

function prescribedState(
	state: Exclude<Extract<Problem, { quantity: 'see-saw' }>['state'], 'free'>,
	dimensions: readonly number[]
): Entries | null {
	const total = dimensions.reduce((product, d) => product * d, 1);
	const wanted = { re: new Float64Array(total), im: new Float64Array(total) };
	if (state === 'maximally-entangled') {
		const [first, second] = dimensions;
		if (first === undefined || second === undefined || dimensions.length !== 2) return null;
		for (let i = 0; i < Math.min(first, second); i++) wanted.re[i * second + i] = 1;
		return wanted;
	}
	if (state.length !== total) return null;
	state.forEach(([re, im], i) => {
		wanted.re[i] = re;
		wanted.im[i] = im;
	});
	return wanted;
}

function workOf(g: Functional, { dimensions }: ReadStrategy, perTerm: boolean): number {
	const total = dimensions.reduce((product, d) => product * d, 1);
	const tuples = new Set(g.terms.map((t) => t.events.map(([p, x]) => `${p}.${x}`).join(' '))).size;
	const transforms = perTerm ? g.terms.length : tuples;
	return total * (4 * transforms * dimensions.reduce((a, b) => a + b, 0) + 4 * g.terms.length);
}

/**
 * Bases V with ||V^H V - 1|| <= eps: the nearest unitary U is within eps (polar factor), so each
 * projector moves by at most eps (2 + eps) and a product of N of them by less than 4 N eps while
 * 4 N eps < 0.1. Rounding: writing the state in a basis costs gamma_2d sqrt(2 d) in norm (real dot
 * products of length 2d, Frobenius norm of [|Re|, |Im|]); an amplitude error x moves P by 2x + x^2.
 */
function projectiveEvaluation(g: Functional, strategy: ReadStrategy): Evaluation | string {
	const { dimensions, measurements } = strategy;
	if (workOf(g, strategy, false) > WORK_LIMIT)
		return 'the strategy is too large to be checked here';
	let eps = 0;
	for (const [party, row] of measurements.entries()) {
		const size = dimensions[party] ?? 1;
		for (const [input, measurement] of row.entries()) {
			if (!measurement.basis || !showsItsBasis(measurement, size))
				return `party ${party}, input ${input}: the elements are not the projectors of the basis`;
			eps = Math.max(eps, basisDefect(measurement.basis, size));
		}
	}
	const moved = 4 * dimensions.length * eps;
	if (!(moved < FIRST_ORDER)) return 'a basis is far from orthonormal';
	const amplitudes = dimensions.reduce((sum, d) => sum + gamma(2 * d + 2) * Math.sqrt(2 * d), 0);
	const rounding = 2.2 * amplitudes + 1.2 * gamma(4 * strategy.state.re.length + 16);
	return {
		probability: projectiveProbabilities(strategy),
		allowance: moved + rounding,
		method: 'projective strategy re-evaluated'
	};
}

/**
 * Elements >= -s that sum to 1: (E + s)/(1 + k s), k outputs, is an exact measurement within k s of
 * them; N parties: 2 N k s while N k s < 0.1. Rounding: each product costs gamma_2d sqrt(2 d), since
 * the Frobenius norm of an element is at most sqrt(d) (1 + k s).
 */
function generalEvaluation(g: Functional, strategy: ReadStrategy): Evaluation | string {
	const { dimensions, measurements } = strategy;
	if (workOf(g, strategy, true) > WORK_LIMIT) return 'the strategy is too large to be checked here';
	let worst = 0;
	const elements: (readonly Entries[])[][] = [];
	for (const [party, row] of measurements.entries()) {
		const own: (readonly Entries[])[] = [];
		for (const [input, measurement] of row.entries()) {
			const proved = provePositive(measurement, dimensions[party] ?? 1);
			if (!proved) return `party ${party}, input ${input}: the elements are no measurement`;
			worst = Math.max(worst, measurement.outputs * proved.defect);
			own.push(proved.elements);
		}
		elements.push(own);
	}
	const moved = 2 * dimensions.length * worst;
	if (!(moved < FIRST_ORDER)) return 'the elements are far from a measurement';
	const products = dimensions.reduce((sum, d) => sum + gamma(2 * d + 2) * Math.sqrt(2 * d), 0);
	const rounding = 1.2 * products + 1.2 * gamma(4 * strategy.state.re.length + 16);
	return {
		probability: generalProbabilities(strategy, elements),
		allowance: moved + rounding + UNIT_ROUNDOFF,
		method: 'strategy with general measurements re-evaluated, elements proved positive'
	};
}
