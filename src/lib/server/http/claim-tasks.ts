import { may } from '../../ledger/policy';
import { suggestedTask, wantsTask } from '../../ledger/suggested-task';
import { openTasksInput } from '../../schemas/task-input';
import type { ClaimView } from '../../schemas/views';
import type { GroupContext } from '../context';
import { renderMarkdown } from '../markdown/render-markdown';
import { findClaim } from '../services/claims/find-claim';
import { parseInput } from '../services/parse-input';
import { openTasks } from '../services/tasks/open-tasks';
import { peopleForTasks } from '../services/tasks/people-for-tasks';
import { claimReproductions } from '../services/tasks/submission-views';
import { tasksOfClaim } from '../services/tasks/tasks-of-claim';
import { taskAction } from './task-form';
import { typedIn } from './typed-in';

/** The tasks of a claim's page, and the form for another one where the viewer opens tasks. */
export async function claimTasks(ctx: GroupContext, claim: ClaimView, disputed: boolean) {
	const rows = await tasksOfClaim(ctx, claim.number);
	const row = await findClaim(ctx.db.read, ctx, claim.number);
	const reproductions = await claimReproductions(ctx.db.read, row);
	const states = rows.map(({ state }) => state);
	const mayOpen = claim.state !== 'withdrawn' && may(ctx.role, 'open-task');
	return {
		rows,
		/** With each comment as safe HTML. */
		reproductions: reproductions.map((found) => ({
			...found,
			commentHtml: renderMarkdown(found.comment)
		})),
		wanted: wantsTask(claim.state, claim.verdict, states, disputed),
		suggested: suggestedTask(claim.verdict, claim.confirmed, disputed),
		/** Null: the viewer opens none here. */
		people: mayOpen ? await peopleForTasks(ctx.db.read, ctx.group.id) : null
	};
}

/** Opens a task on the claim of the page. */
export const assignAction = taskAction(
	'assign',
	'The task is opened; whoever it is for is told.',
	(ctx, number, data) =>
		openTasks(ctx, parseInput(openTasksInput, { ...typedIn(data), claims: [number] }))
);
