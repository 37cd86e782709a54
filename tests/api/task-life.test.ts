import { and, eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { isActiveTask, type TaskState } from '../../src/lib/ledger/tasks';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, submissions, tasks } from '../../src/lib/server/db/schema';
import { ServiceError } from '../../src/lib/server/errors';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { releaseTask } from '../../src/lib/server/services/tasks/release-task';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import '../support/fast-check';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

/** Runs of up to this many steps each; a step is a transaction. */
const RUNS = 30;
const STEPS = 40;

let world: TaskWorld;
let claim: number;
beforeAll(async () => {
	world = await openTaskWorld();
	claim = await world.openClaim();
});
afterAll(() => world.end());

const PEOPLE = ['observer', 'member', 'wren', 'maintainer', 'owner'] as const;
type Who = (typeof PEOPLE)[number];
const contextOf = (who: Who): GroupContext => (who === 'wren' ? world.wren : world.as[who]);
const idOf = (who: Who) => contextOf(who).actor.id;
const leads = (who: Who) => who === 'maintainer' || who === 'owner';

/** What the test knows of a task; written down apart from the product's own rule. */
interface Known {
	state: TaskState;
	holder: Who | null;
	submitter: Who | null;
	/** Changes that were let through, opening included. */
	changes: number;
}

const DOINGS = [
	'take',
	'start',
	'release',
	'submit',
	'accept',
	'return',
	'cancel',
	'give'
] as const;
type Doing = (typeof DOINGS)[number];

interface Step {
	readonly doing: Doing;
	readonly who: Who;
	readonly to: Who | null;
	/** Which of the run's tasks. */
	readonly pick: number;
}

/** The task afterwards; null: it has to be refused. */
function after(task: Known, { doing, who, to }: Step): Omit<Known, 'changes'> | null {
	const { state, holder, submitter } = task;
	const held = state === 'assigned' || state === 'in-progress' || state === 'returned';
	const mine = holder === who;
	switch (doing) {
		case 'take':
			return state === 'open' && who !== 'observer'
				? { state: 'assigned', holder: who, submitter: null }
				: null;
		case 'start':
			return mine && (state === 'assigned' || state === 'returned')
				? { state: 'in-progress', holder, submitter: null }
				: null;
		case 'release':
			return held && (mine || leads(who)) ? { state: 'open', holder: null, submitter: null } : null;
		case 'submit':
			return (held && mine) || (state === 'open' && who !== 'observer')
				? { state: 'submitted', holder: who, submitter: who }
				: null;
		case 'accept':
			return state === 'submitted' && leads(who) && submitter !== who
				? { state: 'accepted', holder, submitter }
				: null;
		case 'return':
			return state === 'submitted' && leads(who) && submitter !== who
				? { state: 'returned', holder, submitter: null }
				: null;
		case 'cancel':
			return isActiveTask(state) && leads(who)
				? { state: 'cancelled', holder, submitter: null }
				: null;
		case 'give': {
			if (!leads(who) || !isActiveTask(state) || to === 'observer') return null;
			if (to === holder) return { state, holder, submitter };
			if (state === 'submitted') return null;
			return { state: to === null ? 'open' : 'assigned', holder: to, submitter: null };
		}
	}
}

async function attempt(number: number, { doing, who, to }: Step): Promise<boolean> {
	const ctx = contextOf(who);
	const verbs: Record<Doing, () => Promise<unknown>> = {
		take: () => takeTask(ctx, number),
		start: () => startTask(ctx, number),
		release: () => releaseTask(ctx, number),
		submit: () => submitTask(ctx, number, foundValue('0.70711')),
		accept: () => acceptSubmission(ctx, number),
		return: () => returnSubmission(ctx, number, 'Once more, please.'),
		cancel: () => cancelTask(ctx, number, 'It is not needed.'),
		give: async () => {
			const [task] = await world.db.read.select().from(tasks).where(byNumber(number));
			const assigneeId = to === null ? '' : idOf(to);
			return editTask(ctx, number, { version: task?.version ?? 0, assigneeId });
		}
	};
	try {
		await verbs[doing]();
		return true;
	} catch (error) {
		if (error instanceof ServiceError && error.status < 500) return false;
		throw error;
	}
}

const byNumber = (number: number) =>
	and(eq(tasks.groupId, world.as.owner.group.id), eq(tasks.number, number));

/** The stored task is what the test knows, with one audit row for each change. */
async function compare(number: number, known: Known): Promise<void> {
	const [task] = await world.db.read.select().from(tasks).where(byNumber(number));
	expect(task).toMatchObject({
		state: known.state,
		assigneeId: known.holder === null ? null : idOf(known.holder),
		version: known.changes
	});
	const rows = await world.db.read
		.select()
		.from(audit)
		.where(and(eq(audit.entity, 'task'), eq(audit.entityId, task?.id ?? '')));
	expect(rows).toHaveLength(known.changes);
	expect(rows.every(({ after: then, actorId, claimId }) => then && actorId && claimId)).toBe(true);
	const tries = await world.db.read
		.select()
		.from(submissions)
		.where(eq(submissions.taskId, task?.id ?? ''));
	for (const { state, submittedBy, decidedBy } of tries) {
		if (state === 'accepted') expect(decidedBy).not.toBe(submittedBy);
	}
	const waiting = tries.filter(({ state }) => state === 'waiting').length;
	expect(waiting).toBe(known.state === 'submitted' ? 1 : 0);
	const accepted = tries.filter(({ state }) => state === 'accepted').length;
	expect(accepted).toBe(known.state === 'accepted' ? 1 : 0);
}

it('over any steps by anyone is legal, recorded step by step, and never self-accepted', async () => {
	const taken = new Set<number>();
	const step: fc.Arbitrary<Step> = fc.record({
		// Often what leads on: a walk that is cut short everywhere sees little.
		doing: fc.oneof(
			{
				weight: 3,
				arbitrary: fc.constantFrom<Doing>('take', 'start', 'submit', 'accept', 'return')
			},
			{ weight: 1, arbitrary: fc.constantFrom(...DOINGS) }
		),
		who: fc.constantFrom(...PEOPLE),
		to: fc.constantFrom(...PEOPLE, null),
		pick: fc.nat(1)
	});
	const reached = new Set<TaskState>();
	await fc.assert(
		fc.asyncProperty(
			fc.array(step, { minLength: 15, maxLength: STEPS }),
			fc.constantFrom('wren' as const, null),
			async (steps, first) => {
				const { numbers } = await openTasks(world.as.maintainer, {
					claims: [claim],
					assigneeId: first === null ? '' : idOf(first)
				});
				const [number = 0] = numbers;
				const others = await openTasks(world.as.owner, { claims: [claim] });
				const run = new Map<number, Known>();
				for (const opened of [...numbers, ...others.numbers]) {
					expect(taken.has(opened)).toBe(false);
					taken.add(opened);
					const holder = opened === number ? first : null;
					const state = holder === null ? 'open' : 'assigned';
					run.set(opened, { state, holder, submitter: null, changes: 1 });
				}
				const all = [...run.keys()];
				for (const each of steps) {
					const picked = all[each.pick % all.length] ?? 0;
					const known = run.get(picked);
					if (!known) continue;
					const expected = after(known, each);
					expect([each, await attempt(picked, each)]).toEqual([each, expected !== null]);
					if (expected) {
						const same = each.doing === 'give' && each.to === known.holder;
						run.set(picked, { ...expected, changes: known.changes + (same ? 0 : 1) });
						reached.add(expected.state);
					}
					await compare(picked, run.get(picked) ?? known);
				}
			}
		),
		{ numRuns: RUNS }
	);
	expect([...reached].sort()).toEqual([
		'accepted',
		'assigned',
		'cancelled',
		'in-progress',
		'open',
		'returned',
		'submitted'
	]);
}, 180_000);
