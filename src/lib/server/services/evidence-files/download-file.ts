import { createHash } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { evidenceFiles } from '../../db/schema';
import { ServiceError } from '../../errors';
import { log } from '../../log';
import { fileStore } from '../../storage/open-store';
import { servedType } from './file-kinds';

export interface DownloadedFile {
	readonly name: string;
	/** As what it is sent, which is not always what it is. */
	readonly mediaType: string;
	readonly bytes: Uint8Array<ArrayBuffer>;
	readonly sha256: string;
}

const unavailable = (message: string) => new ServiceError('unavailable', message, [], 60);

/**
 * A file of one of the group's submissions, exactly as it was handed in.
 * @throws ServiceError not-found, also for a file of another group; unavailable
 */
export async function downloadFile(ctx: GroupContext, id: string): Promise<DownloadedFile> {
	if (!may(ctx.role, 'view-group')) throw new ServiceError('forbidden', 'This is the group’s own.');
	const [row] = await ctx.db.read
		.select()
		.from(evidenceFiles)
		.where(and(eq(evidenceFiles.id, id), eq(evidenceFiles.groupId, ctx.group.id)));
	if (!row) throw new ServiceError('not-found', 'There is no such file in this group.');
	const bytes = await read(id);
	// What a verdict rests on is the file that was handed in, or nothing.
	if (createHash('sha256').update(bytes).digest('hex') !== row.sha256) {
		log().error({ file: id }, 'ALARM: a stored file is not what was handed in');
		throw unavailable('This file is damaged in the storage; the site’s administrator is told.');
	}
	return { name: row.name, mediaType: servedType(row.mediaType), bytes, sha256: row.sha256 };
}

async function read(id: string): Promise<Uint8Array<ArrayBuffer>> {
	let bytes: Uint8Array | null;
	try {
		bytes = await (await fileStore()).get(id);
	} catch (error) {
		log().error({ err: error, file: id }, 'reading evidence failed');
		throw unavailable('The file storage does not answer right now; try again in a minute.');
	}
	if (bytes) return new Uint8Array(bytes);
	log().error({ file: id }, 'ALARM: a stored file is gone');
	throw unavailable('This file is missing from the storage; the site’s administrator is told.');
}
