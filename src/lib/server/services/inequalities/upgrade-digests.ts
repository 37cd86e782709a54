import { and, asc, eq, lt, notInArray, sql } from 'drizzle-orm';
import { DIGEST_VERSION } from '../../../nonlocality/scenario/equivalence';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import type { Database, Transaction } from '../../db/client';
import { inequalities } from '../../db/schema';
import type { CanonicalSubject } from './canonical-subject';
import { mergeInequality } from './merge-inequality';
import { placeSubject } from './place-subject';

/** What became of the inequalities of an earlier digest. */
export interface DigestUpgrade {
	readonly upgraded: number;
	readonly merged: number;
	/** Left as they are, to be tried at the next start: why, by id. */
	readonly failed: Readonly<Record<string, string>>;
}

/**
 * Gives inequalities of an earlier digest version the present one, and merges those that it finds to
 * be equivalent: into the row that has the digest already, else into the named and then the oldest.
 * Each is one transaction, so that it goes on where it was interrupted; it does nothing twice.
 */
export async function upgradeDigests(db: Database, now: () => Date): Promise<DigestUpgrade> {
	const failed: Record<string, string> = {};
	let [upgraded, merged] = [0, 0];
	for (;;) {
		const [row] = await db.read
			.select()
			.from(inequalities)
			.where(
				and(
					lt(inequalities.digestVersion, DIGEST_VERSION),
					notInArray(inequalities.id, Object.keys(failed))
				)
			)
			.orderBy(
				asc(sql`${inequalities.name} is null`),
				asc(inequalities.createdAt),
				asc(inequalities.id)
			)
			.limit(1);
		if (!row) return { upgraded, merged, failed };
		try {
			const place = await placeSubject(functionalOfTerms(row.outputs, row.terms));
			const became = await db.write((tx) => upgradeOne(tx, row.id, place, now()));
			if (became === 'merged') merged++;
			else upgraded++;
		} catch (error) {
			failed[row.id] = error instanceof Error ? error.message : String(error);
		}
	}
}

async function upgradeOne(
	tx: Transaction,
	id: string,
	place: CanonicalSubject,
	now: Date
): Promise<'upgraded' | 'merged'> {
	const [row] = await tx.select().from(inequalities).where(eq(inequalities.id, id));
	if (!row || row.digestVersion >= place.version) return 'upgraded';
	const { digest, version: digestVersion, numerical, scale, shift } = place;
	const [kept] = await tx
		.select()
		.from(inequalities)
		.where(and(eq(inequalities.digestVersion, digestVersion), eq(inequalities.digest, digest)));
	if (kept) {
		await mergeInequality(tx, row, kept, place, now);
		return 'merged';
	}
	await tx
		.update(inequalities)
		.set({ digest, digestVersion, numerical, scale, shift })
		.where(eq(inequalities.id, id));
	return 'upgraded';
}
