import type { Level, Problem, Result } from '../../../nonlocality/problem';
import { largestDimensions } from '../../../nonlocality/scenario/local-dimensions';

function levelText(level: Level): string {
	if (typeof level === 'number' || typeof level === 'string') return `level ${level}`;
	if ('perParty' in level) {
		return `${level.perParty} operator${level.perParty === 1 ? '' : 's'} per party`;
	}
	return `products ${level.products.join(', ')}`;
}

/** `NPA level 2`, `See-saw, dimension 2`: the method in a table's cell. */
export function problemLabel(problem: Problem): string {
	const minimum = problem.sense === 'min' ? ', minimum' : '';
	switch (problem.quantity) {
		case 'value':
			return 'Evaluation';
		case 'local':
			return `Deterministic strategies${minimum}`;
		case 'no-signalling':
			return `No-signalling linear programme${minimum}`;
		case 'hybrid':
			return `Hybrid model, ${problem.model === 'svetlichny' ? 'Svetlichny’s' : 'no-signalling groups'}${minimum}`;
		case 'facet':
			return 'Facet test';
		case 'npa':
			return `NPA ${levelText(problem.level)}${problem.nonNegative ? ', P ≥ 0' : ''}${minimum}`;
		case 'see-saw': {
			const largest = largestDimensions(problem, problem.outputs.length);
			const dimensions = [...new Set(largest)].join(' × ');
			const state = problem.state === 'maximally-entangled' ? ', maximally entangled' : '';
			return `See-saw, dimension ${dimensions}${state}${minimum}`;
		}
		case 'quantum':
			return `Quantum enclosure, up to ${problem.seconds} s${minimum}`;
	}
}

const whole = (value: unknown): number | null =>
	typeof value === 'number' && Number.isSafeInteger(value) ? value : null;

/** `28 × 28, 153 moments`: what was run, as far as the method tells. */
export function methodDetail({ method }: Pick<Result, 'method'>): string {
	const size = whole(method.size);
	const moments = whole(method.moments);
	const iterations = whole(method.iterations);
	const starts = whole(method.starts);
	const level = method.level;
	return [
		typeof level === 'string' && level ? `NPA level ${level}` : null,
		size === null ? null : `${size} × ${size}`,
		moments === null ? null : `${moments} moments`,
		starts === null ? null : `${starts} starts`,
		iterations === null ? null : `${iterations} iterations`
	]
		.filter((part) => part !== null)
		.join(', ');
}
