import type { ProblemOf } from '../problem';
import { negateCoefficient } from '../exact/coefficient';
import { eventsKey, makeFunctional, type Functional } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import { relabelFunctional, type Relabelling } from '../scenario/relabelling';
import { symmetryGroup } from '../scenario/symmetry-group';
import { functionalOfZeroSumForm, zeroSumForm } from '../scenario/zero-sum-form';
import { LevelOneDual } from '../optimization/level-one-dual';
import type { BlockProgramme } from '../optimization/block-programme';
import { MOST_MOMENTS } from './moment-matrix';
import type { MomentProblem } from './moment-problem';
import { SymmetryReduction } from './symmetry-reduction';

/** Multiplications an iteration below which a plain solve ends before a reduction is set up. */
const CHEAP = 3e6;
/** A group of two saves less than the set-up takes. */
const SMALLEST_ORDER = 3;
/** The plain route's kernels do so many multiplications in the time of one here. */
const KERNEL_SPEED = 4;
/** The set-up goes through all elements: a larger group is replaced by a subgroup. */
const MOST_ELEMENTS_USED = 512;

/**
 * The reduction of a relaxation by the symmetries of its functional, where it is predicted to be
 * faster: n^4 + m^3/6 against what the entries of the block programme ask for.
 */
export function chooseReduction(
	problem: ProblemOf<'npa'>,
	g: Functional,
	relaxation: MomentProblem,
	poll: () => void
): SymmetryReduction | null {
	const { size, unknowns } = relaxation.programme;
	if (LevelOneDual.suits(relaxation.programme)) return null;
	const plain = size ** 4 + unknowns ** 3 / 6;
	if (plain < CHEAP || relaxation.equalities.length > 0) return null;
	const group = symmetryGroup(g);
	if (group.order === 1n || !group.generators.every((r) => keepsConstraints(problem, r)))
		return null;
	const elements = group.elementsOfSubgroup(MOST_ELEMENTS_USED);
	const plainFits = unknowns <= MOST_MOMENTS;
	if (elements.length < (plainFits ? SMALLEST_ORDER : 2)) return null;
	const reduction = SymmetryReduction.of(relaxation, elements, poll);
	if (!reduction) return null;
	const cost = KERNEL_SPEED * iterationCost(reduction.programme);
	return cost < plain || !plainFits ? reduction : null;
}

function iterationCost({ sizes, unknowns, values }: BlockProgramme): number {
	const cubes = sizes.reduce((sum, s) => sum + s ** 3, 0);
	// Each unknown's short product has at most as many rows as the blocks, and as its entries.
	const perUnknown = Math.min(cubes, (values.length / unknowns) * 2 * Math.max(...sizes) ** 2);
	return unknowns * perUnknown + (unknowns * values.length) / 2 + unknowns ** 3 / 6 + 10 * cubes;
}

/** Whether a relabelling permutes the inequality constraints. */
function keepsConstraints(problem: ProblemOf<'npa'>, relabelling: Relabelling): boolean {
	const forms = problem.constraints.map(({ terms, relation, value }) => {
		const form = functionalOfTerms(problem, terms);
		const limit = functionalOfTerms(problem, [[value, []]]);
		const minusLimit = limit.terms.map((term) => ({
			...term,
			coefficient: negateCoefficient(term.coefficient)
		}));
		return { relation, form: makeFunctional(problem, [...form.terms, ...minusLimit]) };
	});
	const keys = new Set(forms.map(({ relation, form }) => relation + printForm(form)));
	return forms.every(({ relation, form }) =>
		keys.has(relation + printForm(relabelFunctional(form, relabelling)))
	);
}

function printForm(functional: Functional): string {
	return functionalOfZeroSumForm(zeroSumForm(functional))
		.terms.map(({ events, coefficient }) => `${eventsKey(events)}:${coefficient.text}`)
		.join(';');
}
