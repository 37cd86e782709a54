import type { GroupContext } from '../context';
import { renderMarkdown } from '../markdown/render-markdown';
import { showClaim } from '../services/claims/show-claim';
import { ACCEPTED_NAMES } from '../services/evidence-files/file-kinds';
import { discussionView } from '../services/comments/discussion-view';
import { peopleForTasks } from '../services/tasks/people-for-tasks';
import { showTask } from '../services/tasks/show-task';

/** What a task's page shows: the task, its claim, and what is said of it. */
export async function taskPage(ctx: GroupContext, number: number) {
	const task = await showTask(ctx, number);
	return {
		task,
		claim: await showClaim(ctx, task.claim.number),
		discussion: await discussionView(ctx, 'task', task.id),
		/** Endings of the names of files that a submission takes. */
		accepted: ACCEPTED_NAMES,
		people: await peopleForTasks(ctx.db.read, ctx.group.id),
		/** The comment of each submission, in their order, as safe HTML. */
		comments: task.submissions.map(({ comment }) => renderMarkdown(comment))
	};
}
