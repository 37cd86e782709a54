import { editTaskInput } from '$lib/schemas/task-input';
import { requireRole } from '$lib/server/auth/guards';
import { discussionActions } from '$lib/server/http/discussion-actions';
import { answering } from '$lib/server/http/page-errors';
import { taskNumber } from '$lib/server/http/route-numbers';
import { submitAction } from '$lib/server/http/submit-action';
import { reasonIn, seenIn, taskAction } from '$lib/server/http/task-form';
import { taskPage } from '$lib/server/http/task-page';
import { typedIn } from '$lib/server/http/typed-in';
import { parseInput } from '$lib/server/services/parse-input';
import { acceptSubmission } from '$lib/server/services/tasks/accept-submission';
import { cancelTask } from '$lib/server/services/tasks/cancel-task';
import { editTask } from '$lib/server/services/tasks/edit-task';
import { findTask } from '$lib/server/services/tasks/find-task';
import { releaseTask } from '$lib/server/services/tasks/release-task';
import { returnSubmission } from '$lib/server/services/tasks/return-submission';
import { startTask } from '$lib/server/services/tasks/start-task';
import { takeTask } from '$lib/server/services/tasks/take-task';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const number = taskNumber(event.params.number);
	return answering(() => taskPage(ctx, number));
};

export const actions: Actions = {
	...discussionActions('task', async (ctx, { params }) => {
		return (await findTask(ctx.db.read, ctx, taskNumber(params.number ?? ''))).id;
	}),
	take: taskAction('take', 'It is yours now.', takeTask),
	start: taskAction('start', 'Begun. Submit what you find below.', startTask),
	release: taskAction('release', 'Given back: any member can take it.', releaseTask),
	accept: taskAction('accept', 'Accepted.', (ctx, number, data) =>
		acceptSubmission(ctx, number, seenIn(data), reasonIn(data))
	),
	return: taskAction('return', 'Returned, with your reason.', (ctx, number, data) =>
		returnSubmission(ctx, number, reasonIn(data), seenIn(data))
	),
	cancel: taskAction('cancel', 'Cancelled.', (ctx, number, data) =>
		cancelTask(ctx, number, reasonIn(data))
	),
	edit: taskAction('edit', 'Saved.', (ctx, number, data) =>
		editTask(ctx, number, parseInput(editTaskInput, typedIn(data)))
	),
	submit: submitAction
};
