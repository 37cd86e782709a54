import { and, eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { TaskState } from '../../src/lib/ledger/tasks';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, submissions, tasks } from '../../src/lib/server/db/schema';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import '../support/fast-check';
import {
	DOINGS,
	PEOPLE,
	stepped,
	type Doing,
	type Known,
	type Step,
	type Who
} from '../support/task-model';
import { attemptStep } from '../support/task-steps';
import { openTaskWorld, type TaskWorld } from '../support/task-world';

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

const contextOf = (who: Who): GroupContext => (who === 'wren' ? world.wren : world.as[who]);
const idOf = (who: Who) => contextOf(who).actor.id;

const attempt = (number: number, { doing, who, to }: Step) =>
	attemptStep(contextOf(who), number, doing, to && idOf(to), '0.70711');

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
					const expected = stepped(known, each);
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
