import type { Level, Problem } from '../nonlocality/problem';
import { largestDimensions } from '../nonlocality/scenario/local-dimensions';
import { isAlmostQuantum } from './problem-labels';

/** The same quantity of the same functional: budgets, seeds and starts play no part. */
export function sameQuantity(a: Problem, b: Problem): boolean {
	if (a.quantity !== b.quantity || !comparable(a, b)) return false;
	if (a.quantity === 'npa' && b.quantity === 'npa')
		return sameLevel(a.level, b.level) && positivityAlike(a, b);
	if (a.quantity === 'see-saw' && b.quantity === 'see-saw')
		return (
			JSON.stringify(dimensionsOf(a)) === JSON.stringify(dimensionsOf(b)) &&
			JSON.stringify(a.state) === JSON.stringify(b.state)
		);
	if (a.quantity === 'value' && b.quantity === 'value')
		return JSON.stringify(a.box) === JSON.stringify(b.box);
	if (a.quantity === 'hybrid' && b.quantity === 'hybrid') return a.model === b.model;
	return true;
}

/** Same sense and constraints; that the functional is the same is the caller's to know. */
function comparable(a: Problem, b: Problem): boolean {
	return a.sense === b.sense && JSON.stringify(a.constraints) === JSON.stringify(b.constraints);
}

/**
 * Whether the set behind `a` is known to lie within the one behind `b`, so that the maximum over `a`
 * is at most the one over `b`: local, quantum in a dimension, quantum, NPA (a higher level within a
 * lower), and quantum within no-signalling; local within the hybrid models, no-signalling groups
 * within no-signalling and within Svetlichny's.
 */
export function isWithin(a: Problem, b: Problem): boolean {
	if (!comparable(a, b)) return false;
	if (sameQuantity(a, b)) return true;
	if (isNoMaximum(a) || isNoMaximum(b)) return false;
	if (a.quantity === 'local') return true;
	if (b.quantity === 'local') return false;
	if (a.quantity === 'hybrid')
		return a.model === 'no-signalling' && ['hybrid', 'no-signalling'].includes(b.quantity);
	if (b.quantity === 'hybrid') return false;
	if (a.quantity === 'see-saw') return b.quantity !== 'see-saw' || seeSawWithin(a, b);
	if (b.quantity === 'see-saw') return false;
	if (a.quantity === 'quantum') return true;
	if (b.quantity === 'quantum') return false;
	return a.quantity === 'npa' && b.quantity === 'npa' && npaWithin(a, b);
}

const isNoMaximum = ({ quantity }: Problem) => quantity === 'value' || quantity === 'facet';

type SeeSaw = Extract<Problem, { quantity: 'see-saw' }>;
type Npa = Extract<Problem, { quantity: 'npa' }>;

function seeSawWithin(a: SeeSaw, b: SeeSaw): boolean {
	const within = dimensionsOf(b);
	return b.state === 'free' && dimensionsOf(a).every((d, party) => d <= (within[party] ?? 0));
}

const dimensionsOf = (problem: SeeSaw) => largestDimensions(problem, problem.outputs.length);

function npaWithin(a: Npa, b: Npa): boolean {
	const tighter = levelOrder(a.level);
	const looser = levelOrder(b.level);
	if (tighter === null || looser === null || tighter < looser) return false;
	return a.nonNegative || !b.nonNegative || impliesPositivity(a);
}

/** For two parties the moments of 1+AB make every P(ab|xy) a diagonal entry, so not negative. */
function impliesPositivity(problem: Npa): boolean {
	const order = levelOrder(problem.level);
	return problem.outputs.length === 2 && order !== null && order >= 1.5;
}

function positivityAlike(a: Npa, b: Npa): boolean {
	return a.nonNegative === b.nonNegative || (impliesPositivity(a) && impliesPositivity(b));
}

function sameLevel(a: Level, b: Level): boolean {
	return JSON.stringify(a) === JSON.stringify(b) || (isAlmostQuantum(a) && isAlmostQuantum(b));
}

/** Levels known to be nested; null for the others (lists, several operators per party). */
function levelOrder(level: Level): number | null {
	if (typeof level === 'number') return level;
	return level === '1+AB' ? 1.5 : null;
}
