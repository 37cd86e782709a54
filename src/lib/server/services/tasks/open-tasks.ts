import { and, eq, inArray, sql } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { firstState } from '../../../ledger/task-life';
import { openTasksInput, type OpenTasksInput } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { claims, groups, tasks } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import type { ClaimRow } from '../claims/find-claim';
import { parseInput } from '../parse-input';
import { requireSecondPersons } from './second-person';
import { auditOf } from './step-task';
import { readAssignee, readDueOn } from './task-fields';
import { tellAssigned, type OpenedTask } from './tell-assigned';

/**
 * Opens a task on each of some claims, all or none.
 * @throws ServiceError forbidden; invalid with an issue for each field at fault
 */
export async function openTasks(
	ctx: GroupContext,
	input: Partial<OpenTasksInput>
): Promise<{ numbers: number[] }> {
	if (!may(ctx.role, 'open-task')) {
		throw new ServiceError('forbidden', 'Opening tasks takes the role of a maintainer.');
	}
	const { kind, instructions, ...asks } = parseInput(openTasksInput, input);
	const dueOn = readDueOn(ctx, asks.dueOn, null);
	const wanted = [...new Set(asks.claims)];
	return ctx.db.write(async (tx) => {
		const about = await findClaims(tx, ctx, wanted);
		const assigneeId = await readAssignee(tx, ctx, asks.assigneeId, null);
		await requireSecondPersons(tx, { kind, assigneeId }, about);
		const first = await takeNumbers(tx, ctx, about.length);
		const now = ctx.now();
		const opened: OpenedTask[] = [];
		for (const [i, claim] of about.entries()) {
			const [task] = await tx
				.insert(tasks)
				.values({
					id: newId(),
					groupId: ctx.group.id,
					number: first + i,
					claimId: claim.id,
					kind,
					state: firstState(assigneeId),
					assigneeId,
					dueOn,
					instructions,
					createdBy: ctx.actor.id,
					createdAt: now,
					updatedAt: now
				})
				.returning();
			if (!task) throw new ServiceError('conflict', 'The task could not be written.');
			opened.push({ task, claimNumber: claim.number });
			await recordAudit(tx, ctx, {
				action: 'task.opened',
				entity: 'task',
				entityId: task.id,
				groupId: task.groupId,
				claimId: task.claimId,
				after: auditOf(task)
			});
		}
		await tellAssigned(tx, ctx, opened);
		return { numbers: opened.map(({ task }) => task.number) };
	});
}

/** In the order asked for. @throws ServiceError invalid, naming the first that is none or withdrawn */
async function findClaims(
	tx: Transaction,
	ctx: GroupContext,
	numbers: readonly number[]
): Promise<readonly Pick<ClaimRow, 'id' | 'number'>[]> {
	const rows = await tx
		.select({ id: claims.id, number: claims.number, state: claims.state })
		.from(claims)
		.where(and(eq(claims.groupId, ctx.group.id), inArray(claims.number, [...numbers])));
	return numbers.map((number) => {
		const row = rows.find((claim) => claim.number === number);
		if (row && row.state !== 'withdrawn') return row;
		const message = row
			? `Claim ${number} is withdrawn; restore it first or leave it out.`
			: `There is no claim ${number} in this group.`;
		throw new ServiceError('invalid', message, [{ field: 'claims', message }]);
	});
}

/** The first of so many numbers of the group that nobody else gets. */
async function takeNumbers(tx: Transaction, ctx: GroupContext, many: number): Promise<number> {
	const [group] = await tx
		.update(groups)
		.set({ nextTaskNumber: sql`${groups.nextTaskNumber} + ${many}` })
		.where(eq(groups.id, ctx.group.id))
		.returning({ next: groups.nextTaskNumber });
	if (!group) throw new ServiceError('not-found', 'There is no such group.');
	return group.next - many;
}
