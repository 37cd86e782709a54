import type { Level, Problem, ProblemTerm } from '../../../nonlocality/problem';
import { FORMAT } from '../../../nonlocality/problem';
import { collinsGisinForm } from '../../../nonlocality/scenario/functional';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import { STATIONS, type Station } from '../../db/schema';

/** What a problem is about: the representative of an inequality. */
export interface ProblemSubjectData {
	readonly outputs: readonly (readonly number[])[];
	readonly terms: readonly ProblemTerm[];
}

/** The quantum maximum escalates as long as it is given: as a station it is cut short. */
const QUANTUM_STATION_SECONDS = 10;
export const SEE_SAW_STARTS = 20;
/** The two sides of a quantum maximum are taken for closed at this distance. */
export const QUANTUM_GAP = 1e-8;
const DEFAULT_SEED = 0;

export function problemBase(
	{ outputs, terms }: ProblemSubjectData,
	seconds: number,
	sense: 'max' | 'min' = 'max'
) {
	return {
		format: FORMAT,
		outputs,
		terms,
		sense,
		constraints: [],
		seconds,
		seed: DEFAULT_SEED
	} as const;
}

/** 1+AB for two parties; for others its generalisation, one operator per party. */
export function almostQuantumLevel(parties: number): Level {
	return parties === 2 ? '1+AB' : { perParty: 1 };
}

/**
 * Why a level does not bound a functional at all, null when it does: level k has the moments of at
 * most 2k operators, so that of three parties level 1 knows no correlator.
 */
export function lackingMoments(problem: Problem): string | null {
	if (problem.quantity !== 'npa' || typeof problem.level !== 'number') return null;
	const { level, outputs, terms } = problem;
	const written = Math.max(0, ...terms.map(([, events]) => events.length));
	if (written <= 2 * level) return null;
	// What is written of many parties may cancel down to marginals.
	const { terms: needed } = collinsGisinForm(functionalOfTerms(outputs, terms));
	const most = Math.max(0, ...needed.map(({ events }) => events.length));
	if (most <= 2 * level) return null;
	return `level ${level} has no moments of ${most} parties together, so the functional has no value there; ask for level ${Math.ceil(most / 2)}, or one operator per party`;
}

/** The problems behind the stations, in the order they are run. */
export function stationProblems(
	subject: ProblemSubjectData,
	seconds: number
): readonly { readonly station: Station; readonly problem: Problem }[] {
	const base = problemBase(subject, seconds);
	const parties = subject.outputs.length;
	const problems: Record<Station, Problem> = {
		local: { ...base, quantity: 'local' },
		'no-signalling': { ...base, quantity: 'no-signalling' },
		'npa-1': { ...base, quantity: 'npa', level: 1, nonNegative: false },
		'npa-1-non-negative': { ...base, quantity: 'npa', level: 1, nonNegative: true },
		'almost-quantum': {
			...base,
			quantity: 'npa',
			level: almostQuantumLevel(parties),
			nonNegative: false
		},
		'npa-2': { ...base, quantity: 'npa', level: 2, nonNegative: false },
		'see-saw-2': {
			...base,
			quantity: 'see-saw',
			dimension: subject.outputs.map(() => 2),
			starts: SEE_SAW_STARTS,
			state: 'free'
		},
		quantum: {
			...base,
			seconds: Math.min(seconds, QUANTUM_STATION_SECONDS),
			quantity: 'quantum',
			levels: null,
			dimensions: null,
			gap: QUANTUM_GAP
		}
	};
	return STATIONS.map((station) => ({ station, problem: problems[station] })).filter(
		({ problem }) => lackingMoments(problem) === null
	);
}
