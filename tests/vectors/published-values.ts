/** Claims of published values, judged as `check-claim` judges them. */
import { readFileSync } from 'node:fs';
import { STATION_BUDGET, type StationBudget } from '../../src/cli/claim-stations';
import { judgeClaim } from '../../src/cli/judge-claim';
import type { VerdictStatus } from '../../src/lib/ledger/claim';
import type { DiagnosisKind } from '../../src/lib/ledger/diagnosis';
import { claimedRelation, readStatedValue } from '../../src/lib/ledger/stated-value';
import type { Control } from '../../src/lib/nonlocality';
import { parseClaimJson } from '../../src/lib/schemas/claim-json';
import { parseProblem } from '../../src/lib/schemas/problem';

export interface PublishedValue {
	readonly id: string;
	/** As `check-claim` reads it. */
	readonly claim: { readonly problem: object; readonly value: string };
	readonly expect: VerdictStatus;
	/** Of a discrepancy: the explanation that has to be among those offered. */
	readonly diagnosis?: DiagnosisKind;
	readonly source: string;
	readonly locator: string | null;
	readonly readInTheSource: boolean;
	readonly identifierFromMemory?: true;
	readonly note?: string;
}

export const publishedValues: readonly PublishedValue[] = JSON.parse(
	readFileSync(new URL('./published-values.json', import.meta.url), 'utf8')
);

/** Too long for every run of the tests, with the reason; tests/bench/slow-claims.ts judges them. */
export const SLOW_CLAIMS: Readonly<Record<string, string>> = {
	'i3322.quantum.qubit-bound': 'a discrepancy: runs to the end of its budget for its reason',
	'i3322.quantum': 'a supremum that no finite dimension reaches: 12 digits are not to be had'
};

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => undefined
};

/** `seconds`: for a problem that does not say. */
export async function verdictOf(
	json: object,
	seconds: number,
	stations: StationBudget = STATION_BUDGET
) {
	const written = parseClaimJson(json);
	const reading = readStatedValue(written.printed, written.reading);
	const relation = claimedRelation(reading, written.relation);
	if (!relation) throw new Error('the value starts with another sign than the relation');
	const claim = { ...written, relation };
	const problem = parseProblem({ seconds, ...claim.problem });
	return (await judgeClaim(claim, reading, problem, control, stations)).verdict;
}
