import type { Relation } from '../../ledger/claim';
import { withMinusSign } from '../../ledger/figures';
import type { ProgressView, RecomputationView } from '../../schemas/views';
import { knownSides } from '../digits/shown-between';

const RELATION_WORDS: Readonly<Record<Relation, string>> = {
	'=': 'is',
	'<=': 'is at most',
	'>=': 'is at least'
};

/** `maximum is at most`: how a paper's sentence reads. */
export function relationWords(relation: Relation): string {
	return RELATION_WORDS[relation];
}

const MINUTE = 60;

/** `0.21 s`, `72 s`, `3 min 5 s`, with thin spaces before the units. */
export function duration(seconds: number): string {
	if (seconds < 10) return `${seconds < 0.01 ? '< 0.01' : seconds.toFixed(2)}\u2009s`;
	if (seconds < 2 * MINUTE) return `${Math.round(seconds)}\u2009s`;
	const minutes = Math.floor(seconds / MINUTE);
	return `${minutes}\u2009min ${Math.round(seconds % MINUTE)}\u2009s`;
}

/** True for a job that has not ended. */
export const isUnderWay = (state: ProgressView['state']): boolean =>
	state === 'queued' || state === 'running';

/** A few words on a job that has not ended: `running 62 %`, `queued, 3 before it`. */
export function progressWords(progress: ProgressView): string {
	if (progress.state === 'queued')
		return progress.ahead ? `queued, ${progress.ahead} before it` : 'queued';
	if (progress.state === 'running')
		return progress.fraction === null
			? 'running'
			: `running ${Math.floor(progress.fraction * 100)}\u2009%`;
	return { done: 'done', failed: 'failed', cancelled: 'cancelled' }[progress.state];
}

/** What a recomputation found, a line a side: `= 2`, or `≥ 0.2508` and `≤ 0.2510`. */
export function resultLines(run: RecomputationView): readonly string[] {
	// A fraction and its decimal, a line each.
	if (run.exact !== null) return run.exact.split(' = ').map((part) => withMinusSign(`= ${part}`));
	if (run.lower !== null && run.lower === run.upper) return [`= ${run.lower}`];
	const { lower, upper } = knownSides(run);
	return [...(lower === null ? [] : [`≥ ${lower}`]), ...(upper === null ? [] : [`≤ ${upper}`])].map(
		withMinusSign
	);
}

/** The address of a DOI or an arXiv identifier. */
export const doiAddress = (doi: string): string => `https://doi.org/${encodeURI(doi)}`;
export const arxivAddress = (id: string): string => `https://arxiv.org/abs/${encodeURI(id)}`;
