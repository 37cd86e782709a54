import type { Problem } from '../nonlocality/problem';
import { largestDimensions } from '../nonlocality/scenario/local-dimensions';
import { isAlmostQuantum } from './problem-labels';

const NPA =
	/\bnpa\b|hierarchy|moment matri|relaxation|\bsdp\b|semi-?definite|\blevel\b|\bq_?\{?\d/i;
const ALMOST = /1\s*\+\s*AB|almost[\s-]*quantum/i;
const POSITIVE = /non-?negativ|positiv|macroscopic/i;

/**
 * Whether the method a paper says it used (free text) computes this problem's value. Only orders
 * explanations, so a text that says too little matches nothing.
 */
export function methodMatches(method: string, problem: Problem): boolean {
	switch (problem.quantity) {
		case 'npa':
			return npaMatches(method, problem);
		case 'see-saw':
			return (
				/see-?saw|heuristic|variational|explicit strateg|lower bound/i.test(method) ||
				(largestDimensions(problem, problem.outputs.length).every((d) => d === 2) &&
					/\bqubits?\b/i.test(method)) ||
				(problem.state === 'maximally-entangled' && /maximally[\s-]*entangled/i.test(method))
			);
		case 'local':
			return /\blocal\b|deterministic|vertex|vertices|enumerat|hidden[\s-]*variable/i.test(method);
		case 'no-signalling':
			return /no[\s-]*-?signall?ing|non-?signall?ing|linear program|\bPR\b/i.test(method);
		case 'hybrid':
			return problem.model === 'svetlichny'
				? /svetlichny|hybrid/i.test(method)
				: /hybrid|bi-?local/i.test(method);
		case 'quantum':
		case 'value':
		case 'facet':
			return false;
	}
}

function npaMatches(method: string, problem: Extract<Problem, { quantity: 'npa' }>): boolean {
	const { level } = problem;
	if (isAlmostQuantum(level)) return ALMOST.test(method);
	if (ALMOST.test(method) || typeof level !== 'number') return false;
	if (level === 1 && /macroscopic/i.test(method)) return problem.nonNegative;
	if (!NPA.test(method)) return false;
	const stated = /(?:level|q_?\{?|npa)\s*[-:=]?\s*(\d+)/i.exec(method)?.[1];
	if (stated === undefined || Number(stated) !== level) return false;
	return level !== 1 || problem.nonNegative === POSITIVE.test(method);
}
