import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { and, asc, eq } from 'drizzle-orm';
import { expect } from 'vitest';
import { dayOf } from '../../src/lib/ledger/tasks';
import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import type { OpenTasksInput, SubmissionInput } from '../../src/lib/schemas/task-input';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, memberships, notifications, users } from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { closeSolverPool, setSolverPool } from '../../src/lib/server/jobs/current-pool';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { createDiskStore } from '../../src/lib/server/storage/disk-store';
import { closeFileStore, setFileStore } from '../../src/lib/server/storage/open-store';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from './service';

/** A group that works on tasks, with one more member, files and checks. */
export interface TaskWorld extends ServiceWorld {
	/** A second member. */
	readonly wren: GroupContext;
	/** A claim no solver serves, entered by the member; its number. */
	openClaim(over?: Partial<ClaimInput>): Promise<number>;
	openTask(claim: number, over?: Partial<OpenTasksInput>): Promise<number>;
	/** Audit actions on an entity, oldest first. */
	actions(entityId: string): Promise<readonly string[]>;
	/** Kinds of what a person was told, oldest first. */
	toldTo(ctx: GroupContext): Promise<readonly string[]>;
	end(): Promise<void>;
}

let papers = 100;

export async function openTaskWorld(): Promise<TaskWorld> {
	const world = await openServiceWorld();
	const folder = mkdtempSync(join(tmpdir(), 'merestone-files-'));
	setFileStore(await createDiskStore(folder));
	setSolverPool(createInProcessPool());
	return {
		...world,
		wren: await addMember(world, 'Wren Aldous'),
		async openClaim(over = {}) {
			const fields = claimFields({
				subjectKind: 'described',
				family: '',
				described: 'two qubits, two settings each',
				quantity: 'visibility',
				printed: '0.7071',
				bibtex: bibtexOf(++papers),
				...over
			});
			return (await enterClaim(world.as.member, fields)).number;
		},
		async openTask(claim, over = {}) {
			const { numbers } = await openTasks(world.as.maintainer, { claims: [claim], ...over });
			return numbers[0] ?? 0;
		},
		async actions(entityId) {
			const rows = await world.db.read
				.select({ action: audit.action })
				.from(audit)
				.where(eq(audit.entityId, entityId))
				.orderBy(asc(audit.at), asc(audit.id));
			return rows.map(({ action }) => action);
		},
		async toldTo({ actor, group }) {
			const rows = await world.db.read
				.select({ kind: notifications.kind })
				.from(notifications)
				.where(and(eq(notifications.userId, actor.id), eq(notifications.groupId, group.id)))
				.orderBy(asc(notifications.createdAt), asc(notifications.id));
			return rows.map(({ kind }) => kind);
		},
		async end() {
			await closeFileStore();
			await closeSolverPool();
			world.close();
			rmSync(folder, { recursive: true, force: true });
		}
	};
}

/** Another member of the first group. */
export async function addMember(world: ServiceWorld, name: string): Promise<GroupContext> {
	const id = newId();
	const email = `${id}@reading.example`;
	const createdAt = new Date();
	const { owner } = world.as;
	await world.db.write(async (tx) => {
		await tx.insert(users).values({ id, name, email, passwordHash: 'nobody signs in', createdAt });
		await tx
			.insert(memberships)
			.values({ groupId: owner.group.id, userId: id, role: 'member', createdAt });
	});
	return { ...owner, actor: { id, name, email, isAdmin: false }, role: 'member' };
}

/** A value found with a program of one's own. */
export const foundValue = (printed: string, over: Partial<SubmissionInput> = {}) =>
	({
		kind: 'value',
		printed,
		program: 'own program',
		programVersion: '2.1',
		...over
	}) satisfies Partial<SubmissionInput>;

/** The error of a field, as services throw it. */
export const issueAt = (field: string, message: RegExp) => ({
	code: 'invalid',
	issues: expect.arrayContaining([
		expect.objectContaining({ field, message: expect.stringMatching(message) as unknown })
	]) as unknown
});

/** A day so many days from now, `YYYY-MM-DD`. */
export const inDays = (days: number) => dayOf(new Date(Date.now() + days * 86_400_000));
