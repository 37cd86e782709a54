import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { dayOf } from '../../src/lib/ledger/tasks';
import type { GroupContext } from '../../src/lib/server/context';
import { notifications } from '../../src/lib/server/db/schema';
import { sendDueReminders } from '../../src/lib/server/services/notifications/send-due-reminders';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { releaseTask } from '../../src/lib/server/services/tasks/release-task';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
let claim: number;
beforeEach(async () => {
	world = await openTaskWorld();
	claim = await world.openClaim();
});
afterEach(() => world.end());

const HOUR = 3_600_000;
const DAY = 24 * HOUR;
/** Midnight (UTC) of a day from now on. */
const midnight = (days: number) => Date.parse(dayOf(new Date(Date.now() + days * DAY)));
const at = (ctx: GroupContext, time: number): GroupContext => ({
	...ctx,
	now: () => new Date(time)
});
const remind = (time: number) => sendDueReminders(world.db, new Date(time));
const told = async (kind: 'task-due-soon' | 'task-overdue') =>
	(await world.db.read.select().from(notifications).where(eq(notifications.kind, kind))).map(
		({ userId }) => userId
	);
const wren = () => world.wren.actor.id;

/** Opened at a time, with a date so many days from now. */
async function opened(time: number, due: number, assigneeId = wren()): Promise<number> {
	const dueOn = dayOf(new Date(midnight(due)));
	const { numbers } = await openTasks(at(world.as.maintainer, time), {
		claims: [claim],
		dueOn,
		assigneeId
	});
	return numbers[0] ?? 0;
}

describe('a reminder before the due date', () => {
	it('goes to who was given the date a day before it, or earlier', async () => {
		await opened(midnight(6), 10);
		expect(await remind(midnight(7) - 1)).toBe(0);
		expect(await remind(midnight(7))).toBe(1);
		expect(await told('task-due-soon')).toEqual([wren()]);
	});

	it.each([
		['less than a day before it would go', -DAY + HOUR],
		['while it would go', HOUR]
	])('does not repeat a date set %s', async (_, offset) => {
		const reminderAt = midnight(7);
		await opened(reminderAt + offset, 10);
		for (let day = 0; day < 3; day++) expect(await remind(reminderAt + day * DAY)).toBe(0);
		expect(await remind(midnight(11))).toBe(2);
	});

	it('does not repeat a date changed, or a task given to somebody else, just before', async () => {
		const moved = await opened(midnight(0), 20);
		const given = await opened(midnight(0), 10);
		const late = at(world.as.maintainer, midnight(7) - HOUR);
		const dueOn = dayOf(new Date(midnight(10)));
		const { version } = await showTask(late, moved);
		await editTask(late, moved, { version, assigneeId: wren(), dueOn });
		const to = world.as.member.actor.id;
		await editTask(late, given, {
			version: (await showTask(late, given)).version,
			assigneeId: to,
			dueOn
		});
		expect(await remind(midnight(7))).toBe(0);
	});

	it('goes out all the same after an edit of the words alone', async () => {
		const number = await opened(midnight(0), 10);
		const late = at(world.as.maintainer, midnight(7) - HOUR);
		await editTask(late, number, {
			version: (await showTask(late, number)).version,
			assigneeId: wren(),
			dueOn: dayOf(new Date(midnight(10))),
			instructions: 'Use another solver.'
		});
		expect(await remind(midnight(7))).toBe(1);
	});

	it('goes to who opened it when it was given back, which no mail says', async () => {
		const number = await opened(midnight(0), 10);
		await releaseTask(at(world.wren, midnight(7) - HOUR), number);
		expect(await remind(midnight(7))).toBe(1);
		expect(await told('task-due-soon')).toEqual([world.as.maintainer.actor.id]);
	});

	it('says nothing about what is submitted, and does once it is returned', async () => {
		const number = await opened(midnight(0), 10);
		await submitTask(at(world.wren, midnight(6)), number, foundValue('0.7'));
		expect(await remind(midnight(7))).toBe(0);
		expect(await remind(midnight(12))).toBe(0);
		await returnSubmission(at(world.as.owner, midnight(12)), number, 'More digits.');
		expect(await remind(midnight(12) + HOUR)).toBe(2);
	});
});

describe('that a task is overdue', () => {
	it('is told once for each due date, whoever gets the task then', async () => {
		const number = await opened(midnight(0), 10);
		expect(await remind(midnight(10) + DAY - 1)).toBe(1);
		expect(await remind(midnight(11))).toBe(2);
		const late = at(world.as.maintainer, midnight(12));
		const given = { assigneeId: world.as.member.actor.id };
		const dueOn = dayOf(new Date(midnight(10)));
		await editTask(late, number, {
			version: (await showTask(late, number)).version,
			dueOn,
			...given
		});
		expect(await remind(midnight(13))).toBe(0);
		// Another date, another end.
		await editTask(late, number, {
			version: (await showTask(late, number)).version,
			dueOn: dayOf(new Date(midnight(14))),
			...given
		});
		expect(await remind(midnight(15))).toBe(2);
		await submitTask(at(world.as.member, midnight(15)), number, foundValue('0.7'));
		await acceptSubmission(at(world.as.owner, midnight(15)), number);
		expect(await remind(midnight(16))).toBe(0);
		expect(await told('task-overdue')).toHaveLength(4);
	});
});
