import type { GroupContext } from '../../src/lib/server/context';
import { ServiceError } from '../../src/lib/server/errors';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { findTask } from '../../src/lib/server/services/tasks/find-task';
import { releaseTask } from '../../src/lib/server/services/tasks/release-task';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import type { Doing } from './task-model';
import { foundValue } from './task-world';

/** One step by its service. @returns whether it was let through */
export function attemptStep(
	ctx: GroupContext,
	number: number,
	doing: Doing,
	/** Whom it is given to; null: to all. */
	to: string | null,
	/** The value that is submitted. */
	value: string
): Promise<boolean> {
	const verbs: Record<Doing, () => Promise<unknown>> = {
		take: () => takeTask(ctx, number),
		start: () => startTask(ctx, number),
		release: () => releaseTask(ctx, number),
		submit: () => submitTask(ctx, number, foundValue(value)),
		accept: () => acceptSubmission(ctx, number),
		return: () => returnSubmission(ctx, number, 'Once more, please.'),
		cancel: () => cancelTask(ctx, number, 'It is not needed.'),
		give: async () => {
			const { version } = await findTask(ctx.db.read, ctx, number);
			return editTask(ctx, number, { version, assigneeId: to ?? '' });
		}
	};
	return letThrough(verbs[doing]);
}

/** Whether a service did it; what is no refusal is thrown on. */
export async function letThrough(doIt: () => Promise<unknown>): Promise<boolean> {
	try {
		await doIt();
		return true;
	} catch (error) {
		if (error instanceof ServiceError && error.status < 500) return false;
		throw error;
	}
}
