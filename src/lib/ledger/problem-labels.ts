import type { Level, Problem } from '../nonlocality/problem';
import { largestDimensions } from '../nonlocality/scenario/local-dimensions';

/** `1`, `1+AB`, `2 per party`, `the products A, B, AB`. */
function levelName(level: Level): string {
	if (typeof level === 'number' || typeof level === 'string') return String(level);
	if ('perParty' in level)
		return level.perParty === 1
			? 'of one operator per party'
			: `of ${level.perParty} operators per party`;
	return `of the products ${level.products.join(', ')}`;
}

function npaName(level: Level): string {
	return typeof level === 'object'
		? `the NPA level ${levelName(level)}`
		: `NPA level ${levelName(level)}`;
}

/** 1+AB, or one operator per party. */
export function isAlmostQuantum(level: Level): boolean {
	return (
		level === '1+AB' || (typeof level === 'object' && 'perParty' in level && level.perParty === 1)
	);
}

/** `2`, or `2 x 3` where the parties differ: the largest ones that are searched. */
function dimensionName(problem: Extract<Problem, { quantity: 'see-saw' }>): string {
	const dimension = largestDimensions(problem, problem.outputs.length);
	return new Set(dimension).size === 1 ? String(dimension[0]) : dimension.join(' x ');
}

/** What the parties of one group may share. */
const HYBRID_MODELS = {
	svetlichny: "Svetlichny's model",
	'no-signalling': 'no-signalling groups'
} as const;

const extremum = (problem: Problem) => (problem.sense === 'max' ? 'maximum' : 'minimum');

/** What a problem's value is, for "the paper meant ...". */
export function valueLabel(problem: Problem): string {
	const sought = soughtLabel(problem);
	return problem.quantity === 'see-saw' ? `${sought} (best value found)` : sought;
}

/** The quantity that a problem asks for, whether it is found or only bounded. */
export function soughtLabel(problem: Problem): string {
	switch (problem.quantity) {
		case 'value':
			return 'the value of the given box';
		case 'local':
			return `the local ${extremum(problem)}`;
		case 'no-signalling':
			return `the no-signalling ${extremum(problem)}`;
		case 'quantum':
			return `the quantum ${extremum(problem)}`;
		case 'hybrid':
			return `the hybrid ${extremum(problem)} (${HYBRID_MODELS[problem.model]})`;
		case 'facet':
			return 'the facet test';
		case 'see-saw':
			return problem.state === 'maximally-entangled'
				? `the ${extremum(problem)} with a maximally entangled state of local dimension ${dimensionName(problem)}`
				: `the quantum ${extremum(problem)} in local dimension ${dimensionName(problem)}`;
		case 'npa': {
			const { level, nonNegative } = problem;
			if (isAlmostQuantum(level)) return `the almost-quantum bound (${npaName(level)})`;
			if (level === 1 && nonNegative && problem.outputs.length === 2)
				return 'the macroscopic-locality bound (NPA level 1 with non-negative probabilities)';
			const positivity = nonNegative ? ' with non-negative probabilities' : '';
			const without = level === 1 && !nonNegative ? ' without non-negative probabilities' : '';
			return `the bound of ${npaName(level)}${positivity}${without}`;
		}
	}
}

/** What proves that the value reaches at least so far (for `max`; at most, for `min`). */
export function innerLabel(problem: Problem): string {
	switch (problem.quantity) {
		case 'local':
			return 'a deterministic strategy';
		case 'no-signalling':
			return 'a no-signalling box';
		case 'hybrid':
			return 'a strategy of two groups';
		case 'npa':
			return `a feasible moment matrix of ${npaName(problem.level)}`;
		case 'see-saw':
			return `an explicit quantum strategy in dimension ${dimensionName(problem)}`;
		case 'quantum':
			return 'an explicit quantum strategy';
		case 'value':
		case 'facet':
			return 'evaluation';
	}
}

/** What proves that the value reaches no farther. */
export function outerLabel(problem: Problem): string {
	switch (problem.quantity) {
		case 'local':
			return 'the enumeration of all deterministic strategies';
		case 'no-signalling':
			return 'the no-signalling linear programme';
		case 'hybrid':
			return problem.model === 'svetlichny'
				? 'the enumeration of all joint strategies'
				: 'linear programmes for every bipartition';
		case 'npa':
			return (
				npaName(problem.level) + (problem.nonNegative ? ' with non-negative probabilities' : '')
			);
		case 'quantum':
			return 'the moment-matrix relaxation';
		case 'see-saw':
		case 'value':
		case 'facet':
			return 'evaluation';
	}
}

/** The quantity and its fields in the problem format. */
export function fieldsOf(problem: Problem): {
	readonly quantity: string;
	readonly fields: Readonly<Record<string, unknown>>;
} {
	const { quantity } = problem;
	const sense = problem.sense === 'min' ? { sense: 'min' } : {};
	if (quantity === 'npa')
		return {
			quantity,
			fields: { ...sense, level: problem.level, nonNegative: problem.nonNegative }
		};
	if (quantity === 'see-saw')
		return {
			quantity,
			fields: {
				...sense,
				dimension: problem.dimension,
				...(problem.grow !== undefined && { grow: problem.grow }),
				...(problem.state === 'maximally-entangled' ? { state: problem.state } : {})
			}
		};
	if (quantity === 'hybrid') return { quantity, fields: { ...sense, model: problem.model } };
	return { quantity, fields: sense };
}
