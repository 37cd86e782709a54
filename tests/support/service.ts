import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Role } from '../../src/lib/ledger/roles';
import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import type { Context, GroupContext } from '../../src/lib/server/context';
import { openDatabase, type Database } from '../../src/lib/server/db/client';
import { groups, memberships, users } from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { setSolverPool } from '../../src/lib/server/jobs/current-pool';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { startRunner, type JobLog, type Runner } from '../../src/lib/server/jobs/runner';
import { createDiskStore } from '../../src/lib/server/storage/disk-store';
import { setFileStore } from '../../src/lib/server/storage/open-store';

/** Invented people and a group of theirs on a database of its own, without a server. */
export interface ServiceWorld {
	readonly db: Database;
	readonly anonymous: Context;
	/** Contexts in the first group. */
	readonly as: Readonly<Record<Role, GroupContext>>;
	/** The owner of another group. */
	readonly outsider: GroupContext;
	/** Runs everything that is queued, in this thread. */
	recompute(): Promise<void>;
	close(): void;
}

export const silent: JobLog = {
	info: () => undefined,
	warn: () => undefined,
	error: () => undefined
};

export function inProcessRunner(db: Database, log: JobLog = silent): Runner {
	return startRunner({
		db,
		log,
		pool: createInProcessPool(),
		now: () => new Date(),
		pollMs: 60_000
	});
}

export async function openServiceWorld(): Promise<ServiceWorld> {
	// Tokens are derived from it.
	process.env.MERESTONE_SECRET ??= 'a secret of the tests, of no use elsewhere';
	const folder = mkdtempSync(join(tmpdir(), 'merestone-test-'));
	const { db, close } = await openDatabase(`file:${join(folder, 'test.db')}`);
	setSolverPool(createInProcessPool());
	setFileStore(await createDiskStore(join(folder, 'files')));
	const anonymous: Context = { db, actor: null, requestId: 'test', now: () => new Date() };
	const at = new Date();
	const person = async (name: string) => {
		const id = newId();
		const email = `${name.toLowerCase().replace(/\W+/g, '.')}@reading.example`;
		const passwordHash = 'nobody signs in here';
		await db.write((tx) =>
			tx.insert(users).values({ id, name, email, passwordHash, createdAt: at })
		);
		return { id, name, email, isAdmin: false };
	};
	const group = async (slug: string, name: string, createdBy: string) => {
		const row = { id: newId(), slug, name };
		await db.write((tx) => tx.insert(groups).values({ ...row, createdBy, createdAt: at }));
		return row;
	};
	const join_ = async (
		actor: Awaited<ReturnType<typeof person>>,
		into: Awaited<ReturnType<typeof group>>,
		role: Role
	): Promise<GroupContext> => {
		await db.write((tx) =>
			tx.insert(memberships).values({ groupId: into.id, userId: actor.id, role, createdAt: at })
		);
		return { ...anonymous, actor, group: into, role };
	};
	const owner = await person('Olin Owner');
	const other = await person('Xenia Outside');
	const first = await group('first', 'First group', owner.id);
	const second = await group('second', 'Second group', other.id);
	const as = {
		owner: await join_(owner, first, 'owner'),
		maintainer: await join_(await person('Mae Maintainer'), first, 'maintainer'),
		member: await join_(await person('Mo Member'), first, 'member'),
		observer: await join_(await person('Obi Observer'), first, 'observer')
	};
	return {
		db,
		anonymous,
		as,
		outsider: await join_(other, second, 'owner'),
		async recompute() {
			const runner = inProcessRunner(db);
			await runner.idle();
			await runner.stop();
		},
		close() {
			close();
			rmSync(folder, { recursive: true, force: true });
		}
	};
}

/** An invented paper of its own for each number. */
export const bibtexOf = (n = 1) => `@article{arden${n},
  author  = {Arden, Mira and Voss, Tam},
  title   = {A note on two settings, part ${n}},
  journal = {J. Invented Phys.},
  year    = {2004},
  doi     = {10.5555/jip.${n}}
}`;

/** CHSH's quantum maximum as a paper would print it; change what the test is about. */
export function claimFields(over: Partial<ClaimInput> = {}): Partial<ClaimInput> {
	return {
		subjectKind: 'family',
		family: 'chsh',
		quantity: 'quantum',
		printed: '2.8284',
		method: 'NPA level 1',
		locator: 'eq. (7)',
		paper: 'bibtex',
		bibtex: bibtexOf(),
		...over
	};
}
