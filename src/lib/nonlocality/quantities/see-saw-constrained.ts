import type { StrategyCertificate } from '../certificates/types';
import { setComplex } from '../linalg/complex-dense';
import { seededRandom } from '../linalg/seeded-random';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { ConstraintForm } from '../scenario/constraint-form';
import type { Functional } from '../scenario/functional';
import type { Outcome } from './outcome';
import { expectBudgetSpent, pollWithin } from './search-budget';
import { ConstrainedAscent } from './see-saw-constraints';
import { printDimensions } from './see-saw-dimensions';
import { fixedState } from './see-saw-fixed-state';
import { formValue, guaranteedValue } from './see-saw-guarantee';
import { randomStrategy, type SeeSawStrategy } from './see-saw-strategy';
import { evaluateStrategy } from './strategy-evaluation';

/**
 * A strategy counts when no constraint is violated by more than this, rounding included, as a share
 * of the constraint's coefficients: far above what rounding leaves (1e-13), far below what papers
 * print. The check of certificates has the same.
 */
export const CONSTRAINT_TOLERANCE = 1e-9;

interface ConstrainedSearch {
	readonly dimensions: readonly number[];
	readonly starts: number;
	readonly seed: number;
	readonly seconds: number;
	readonly state: ProblemOf<'see-saw'>['state'];
	readonly from: SeeSawStrategy | null;
}

/**
 * Best of many ascents under constraints from seeded random strategies. `lower` is guaranteed when
 * all constraints are inequalities that provably hold; otherwise it is the value of a strategy that
 * meets them within `method.violation` and is numerical.
 * @throws SolverStop `failed` when no start met the constraints, `limit` when none could end
 */
export function searchUnderConstraints(
	g: Functional,
	forms: readonly ConstraintForm[],
	search: ConstrainedSearch,
	control: Control
): Outcome {
	const { dimensions, seed, starts } = search;
	const given = fixedState(search.state, dimensions);
	const poll = pollWithin(control, search.seconds);
	const ascent = new ConstrainedAscent(g, forms, { moveState: given === null, poll });
	let best: { certificate: StrategyCertificate; real: boolean; start: number } | null = null;
	let nearest = Infinity;
	let done = 0;
	try {
		for (; done < starts; done++) {
			const random = seededRandom(seed, done);
			const kind = { real: done % 2 === 0 && !given?.im, general: done % 4 > 1 };
			const from = done === 0 ? search.from : null;
			const strategy = from ?? randomStrategy(g.scenario.outputs, dimensions, kind, random);
			if (given) setComplex(strategy.state, given);
			const reached = ascent.run(strategy, best?.certificate.value ?? -Infinity);
			control.report({
				stage: `see-saw under constraints, dimension ${printDimensions(dimensions)}`,
				iteration: done + 1,
				fraction: (done + 1) / starts,
				lower: best?.certificate.value ?? null,
				upper: null
			});
			if (!reached) continue;
			const plain = guaranteedValue(g, reached);
			const { violation, share } = violationOf(forms, reached);
			nearest = Math.min(nearest, share);
			if (share > CONSTRAINT_TOLERANCE || plain.value <= (best?.certificate.value ?? -Infinity))
				continue;
			best = { certificate: { ...plain, violation }, real: reached.real, start: done };
		}
	} catch (error) {
		expectBudgetSpent(error);
	}
	if (!best) throw noneFound(done, nearest, search.seconds);
	const { certificate, real, start } = best;
	const proved = certificate.violation === 0;
	return {
		lower: certificate.value,
		upper: null,
		value: null,
		tolerance: null,
		optimum: certificate.value,
		guaranteed: { lower: proved, upper: false },
		exact: null,
		method: {
			name: 'see-saw under constraints',
			dimension: dimensions,
			starts: done,
			bestStart: start,
			real,
			projective: certificate.projective,
			constraints: proved
				? 'all hold, proved'
				: 'met within the violation only: the value is numerical',
			violation: certificate.violation,
			constraintTolerance: CONSTRAINT_TOLERANCE
		},
		certificate
	};
}

/** The largest violation, rounding included; `share` of the constraint's own coefficients. */
function violationOf(forms: readonly ConstraintForm[], strategy: SeeSawStrategy) {
	const evaluation = evaluateStrategy(strategy);
	let violation = 0;
	let share = 0;
	for (const { form, equality } of forms) {
		const { value, allowance } = formValue(form, evaluation);
		const own = Math.max(0, (equality ? Math.abs(value) : value) + allowance);
		const unit = form.terms.reduce((sum, { coefficient: c }) => sum + Math.abs(c.value), 0);
		violation = Math.max(violation, own);
		share = Math.max(share, own / Math.max(1, unit));
	}
	return { violation, share };
}

function noneFound(done: number, nearest: number, seconds: number): SolverStop {
	if (done === 0) return new SolverStop('limit', `no start was possible within ${seconds} s`);
	const distance = Number.isFinite(nearest)
		? `; the nearest violates one by ${nearest.toPrecision(2)} of its coefficients`
		: '';
	return new SolverStop(
		'failed',
		`none of ${done} starts met the constraints within ${CONSTRAINT_TOLERANCE}${distance}`
	);
}
