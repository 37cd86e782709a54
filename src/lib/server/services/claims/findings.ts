import { and, eq, inArray, isNotNull, or } from 'drizzle-orm';
import type { Finding } from '../../../ledger/evidence';
import type { Transaction } from '../../db/client';
import { claims, recomputations, type Station } from '../../db/schema';
import { loadEarlier } from '../recomputations/earlier-results';

/** A finished recomputation as verdicts see it. */
export interface StoredFinding extends Finding {
	readonly id: string;
	readonly isStation: boolean;
}

/** Of values that would explain a claim equally well, the one a paper most likely meant. */
const EXPLAINING: readonly Station[] = [
	'quantum',
	'almost-quantum',
	'npa-1-non-negative',
	'npa-1',
	'see-saw-2',
	'no-signalling',
	'local',
	'npa-2'
];

/**
 * What has been recomputed about an inequality: its stations, and what the group's own claims asked
 * for. What another group's claims asked for stays with that group.
 */
async function loadFindings(
	tx: Transaction,
	inequalityId: string,
	groupId: string
): Promise<StoredFinding[]> {
	const asked = tx
		.select({ id: claims.recomputationId })
		.from(claims)
		.where(
			and(
				eq(claims.inequalityId, inequalityId),
				eq(claims.groupId, groupId),
				isNotNull(claims.recomputationId)
			)
		);
	const rows = await tx
		.select(FINDING_COLUMNS)
		.from(recomputations)
		.where(
			and(
				eq(recomputations.inequalityId, inequalityId),
				isNotNull(recomputations.summary),
				or(isNotNull(recomputations.station), inArray(recomputations.id, asked))
			)
		);
	const order = (station: Station | null) =>
		station === null ? EXPLAINING.length : EXPLAINING.indexOf(station);
	const earlier = await loadEarlier(
		tx,
		rows.map(({ id }) => id)
	);
	return [...rows]
		.sort((a, b) => order(a.station) - order(b.station))
		.flatMap((row) => [
			...[findingOf(row) ?? []].flat(),
			...earlier
				.filter(({ recomputationId }) => recomputationId === row.id)
				.flatMap((before) => findingOf({ ...row, ...before, checked: true }) ?? [])
		]);
}

const FINDING_COLUMNS = {
	id: recomputations.id,
	station: recomputations.station,
	checked: recomputations.checked,
	checkNote: recomputations.checkNote,
	lower: recomputations.lower,
	upper: recomputations.upper,
	exact: recomputations.exact,
	summary: recomputations.summary,
	problem: recomputations.problem
} as const;

function findingOf(
	row: Pick<typeof recomputations.$inferSelect, keyof typeof FINDING_COLUMNS>
): StoredFinding | null {
	const { id, station, checked, checkNote, lower, upper, exact, summary, problem } = row;
	if (!summary) return null;
	const check =
		checked === null
			? null
			: checked
				? ({ checked, lower, upper, exact, method: checkNote ?? '' } as const)
				: ({ checked, reason: checkNote ?? '' } as const);
	return { id, isStation: station !== null, result: { ...summary, problem }, check };
}

/** What one recomputation found; null while it has not. */
export async function loadFinding(tx: Transaction, id: string): Promise<StoredFinding | null> {
	const [row] = await tx
		.select(FINDING_COLUMNS)
		.from(recomputations)
		.where(eq(recomputations.id, id));
	return row ? findingOf(row) : null;
}

/** The findings on a claim's inequality; judging many claims reads each set once. */
export type FindingsOf = (
	claim: Readonly<Pick<typeof claims.$inferSelect, 'inequalityId' | 'groupId'>>
) => Promise<readonly StoredFinding[]>;

export function findingsCache(tx: Transaction): FindingsOf {
	const known = new Map<string, Promise<readonly StoredFinding[]>>();
	return async ({ inequalityId, groupId }) => {
		if (inequalityId === null) return [];
		const key = `${inequalityId} ${groupId}`;
		const found = known.get(key) ?? loadFindings(tx, inequalityId, groupId);
		known.set(key, found);
		return found;
	};
}
