import { eq, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import { dayOf, isOverdue } from '../../../ledger/tasks';
import type { ClaimTask, TaskRow } from '../../../schemas/task-views';
import type { Reader } from '../../db/client';
import { claims, groups, inequalities, references, tasks, users } from '../../db/schema';
import { renderMarkdown } from '../../markdown/render-markdown';
import { claimSubject } from '../inequalities/subject-view';

export const assignees = alias(users, 'assignees');
const creators = alias(users, 'creators');

/** The columns of a task's row; one join, so that any list can filter and sort by them. */
export function selectTaskRows(read: Reader, where: SQL | undefined) {
	return read
		.select({
			task: tasks,
			group: { slug: groups.slug, name: groups.name },
			assignee: assignees.name,
			creator: creators.name,
			claim: claims,
			inequality: {
				name: inequalities.name,
				nameLatex: inequalities.nameLatex,
				scenario: inequalities.scenario
			},
			reference: references.short
		})
		.from(tasks)
		.innerJoin(groups, eq(groups.id, tasks.groupId))
		.innerJoin(claims, eq(claims.id, tasks.claimId))
		.innerJoin(references, eq(references.id, claims.referenceId))
		.innerJoin(creators, eq(creators.id, tasks.createdBy))
		.leftJoin(assignees, eq(assignees.id, tasks.assigneeId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.where(where)
		.$dynamic();
}

export type SelectedTask = Awaited<ReturnType<typeof selectTaskRows>>[number];

export function taskRow(selected: SelectedTask, now: Date): TaskRow {
	const { task, group, assignee, creator, claim, inequality, reference } = selected;
	const { id, number, version, kind, state, assigneeId, dueOn, instructions, reason } = task;
	return {
		id,
		groupSlug: group.slug,
		groupName: group.name,
		number,
		version,
		kind,
		state,
		assignee: assigneeId === null ? null : { id: assigneeId, name: assignee ?? '' },
		dueOn,
		overdue: isOverdue(dueOn, state, dayOf(now)),
		instructions,
		reason,
		createdBy: { id: task.createdBy, name: creator },
		createdAt: task.createdAt.toISOString(),
		updatedAt: task.updatedAt.toISOString(),
		claim: {
			id: claim.id,
			number: claim.number,
			quantityLabel: claim.quantityLabel,
			subject: claimSubject(claim, inequality),
			relation: claim.relation,
			printed: claim.printed,
			status: claim.status,
			reference,
			locator: claim.locator
		}
	};
}

/** The same with its texts set, for pages that show few. */
export function claimTask(selected: SelectedTask, now: Date): ClaimTask {
	const row = taskRow(selected, now);
	return {
		...row,
		instructionsHtml: renderMarkdown(row.instructions),
		reasonHtml: renderMarkdown(row.reason)
	};
}
