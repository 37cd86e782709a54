import { inArray } from 'drizzle-orm';
import type { Database } from '../../db/client';
import { evidenceFiles } from '../../db/schema';
import { timeOfKey, type FileStore } from '../../storage/file-store';

/** A submission's transaction follows its files within seconds; a day leaves no doubt. */
const OLD_MS = 24 * 3_600_000;
/** Keys looked up in one query. */
const BATCH = 200;
/**
 * Files deleted in one sweep at most. Crashes leave a handful; more would mean that the storage is
 * another database's, or that the database is an older copy.
 */
export const MOST_ORPHANS = 100;

export interface Sweep {
	readonly deleted: number;
	/** More than `MOST_ORPHANS` were found, so that none was deleted. */
	readonly refused: boolean;
}

/**
 * Deletes files that no row names: of submissions that failed after the process died, and of
 * groups that are gone.
 */
export async function sweepOrphans(db: Database, store: FileStore, now: Date): Promise<Sweep> {
	const orphans: string[] = [];
	let batch: string[] = [];
	const look = async () => {
		if (batch.length === 0) return;
		const rows = await db.read
			.select({ id: evidenceFiles.id })
			.from(evidenceFiles)
			.where(inArray(evidenceFiles.id, batch));
		const known = new Set(rows.map(({ id }) => id));
		orphans.push(...batch.filter((key) => !known.has(key)));
		batch = [];
	};
	for await (const key of store.keys()) {
		if (now.getTime() - timeOfKey(key).getTime() < OLD_MS) continue;
		batch.push(key);
		if (batch.length === BATCH) await look();
		if (orphans.length > MOST_ORPHANS) return { deleted: 0, refused: true };
	}
	await look();
	if (orphans.length > MOST_ORPHANS) return { deleted: 0, refused: true };
	for (const key of orphans) await store.delete(key);
	return { deleted: orphans.length, refused: false };
}
