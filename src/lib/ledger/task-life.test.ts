import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ROLES, type Role } from './roles';
import {
	PRODUCT,
	TASK_STEPS,
	isRefused,
	nextTask,
	type TaskActor,
	type TaskFacts,
	type TaskStep,
	type TaskStepKind
} from './task-life';
import { TASK_STATES, isActiveTask, type TaskState } from './tasks';

const WORKER = 'wren';
const stepOf = (kind: TaskStepKind, reason = 'see the comment'): TaskStep =>
	kind === 'return' || kind === 'cancel'
		? { kind, reason }
		: kind === 'assign'
			? { kind, to: 'tam' }
			: { kind };

/** A task in a state as its life leaves it: assigned to the worker, submitted by them. */
function taskIn(state: TaskState, over: Partial<TaskFacts> = {}): TaskFacts {
	const handedIn = state === 'submitted' || state === 'accepted';
	return {
		state,
		assigneeId: state === 'open' ? null : WORKER,
		submittedBy: handedIn ? WORKER : null,
		assigneeGone: false,
		...over
	};
}

const idOf = (who: TaskActor) => (who === PRODUCT ? 'the product' : who.id);
const worker: TaskActor = { id: WORKER, role: 'member' };
const maintainer: TaskActor = { id: 'mae', role: 'maintainer' };

/** What a step by the one entitled to it makes of a task; `-`: refused as a conflict. */
const LIFE: Readonly<Record<TaskStepKind, readonly [TaskActor, string]>> = {
	//         open      assigned    in-progress submitted returned    accepted cancelled
	take: [worker, 'assigned -           -           -         -           -        -'],
	start: [worker, '-        in-progress -           -         in-progress -        -'],
	release: [worker, '-        open        open        -         open        -        -'],
	submit: [worker, 'submitted submitted submitted   -         submitted   -        -'],
	accept: [maintainer, '-     -           -           accepted  -           -        -'],
	return: [maintainer, '-     -           -           returned  -           -        -'],
	cancel: [maintainer, 'cancelled cancelled cancelled cancelled cancelled - -'],
	assign: [maintainer, 'assigned assigned assigned    -         assigned    -        -'],
	reopen: [PRODUCT, '-        -           -           -         -           returned -']
};
const COLUMNS: readonly TaskState[] = [
	'open',
	'assigned',
	'in-progress',
	'submitted',
	'returned',
	'accepted',
	'cancelled'
];

describe('the life of a task', () => {
	const cases = TASK_STEPS.flatMap((kind) => {
		const [who, row] = LIFE[kind];
		return row.split(/\s+/).map((after, i) => ({ kind, who, state: COLUMNS[i] ?? 'open', after }));
	});

	it('is asked about in every state', () => {
		expect(cases).toHaveLength(TASK_STEPS.length * TASK_STATES.length);
		expect([...COLUMNS].sort()).toEqual([...TASK_STATES].sort());
	});

	it.each(cases)('$kind when $state: $after', ({ kind, who, state, after }) => {
		const next = nextTask(taskIn(state), stepOf(kind), who);
		if (after === '-') {
			expect(next).toMatchObject({ refused: 'conflict' });
			expect(next).toHaveProperty('message', expect.stringMatching(/^The task is .+ now, so/));
		} else expect(next).toMatchObject({ state: after });
	});

	/** From which role on a step is open to somebody else than the one who has or submitted it. */
	const BY_OTHERS: Readonly<Record<TaskStepKind, Role | null>> = {
		take: 'member',
		start: null,
		release: 'maintainer',
		submit: null,
		accept: 'maintainer',
		return: 'maintainer',
		cancel: 'maintainer',
		assign: 'maintainer',
		reopen: null
	};
	const POSSIBLE: Readonly<Record<TaskStepKind, TaskState>> = {
		take: 'open',
		start: 'assigned',
		release: 'in-progress',
		submit: 'in-progress',
		accept: 'submitted',
		return: 'submitted',
		cancel: 'assigned',
		assign: 'assigned',
		reopen: 'accepted'
	};

	it.each(TASK_STEPS)('%s by somebody else, for each role', (kind) => {
		const from = BY_OTHERS[kind];
		for (const role of ROLES) {
			const next = nextTask(taskIn(POSSIBLE[kind]), stepOf(kind), { id: 'other', role });
			const allowed = from !== null && ROLES.indexOf(role) >= ROLES.indexOf(from);
			expect([role, isRefused(next)]).toEqual([role, !allowed]);
			if (!allowed) expect(next).toMatchObject({ refused: 'forbidden' });
		}
	});

	it.each(ROLES)('%s neither accepts nor returns what they submitted', (role) => {
		for (const kind of ['accept', 'return'] as const) {
			const next = nextTask(taskIn('submitted'), stepOf(kind), { id: WORKER, role });
			expect(next).toMatchObject({ refused: 'forbidden' });
		}
	});

	it('takes an open task with its submission, for members and up', () => {
		const by = (role: Role) => nextTask(taskIn('open'), { kind: 'submit' }, { id: 'tam', role });
		expect(by('member')).toEqual({ state: 'submitted', assigneeId: 'tam' });
		expect(by('observer')).toMatchObject({ refused: 'forbidden' });
	});

	it('leaves to people all but giving back, cancelling and reopening', () => {
		const done = TASK_STEPS.filter(
			(kind) => !isRefused(nextTask(taskIn(POSSIBLE[kind]), stepOf(kind), PRODUCT))
		);
		expect(done).toEqual(['release', 'cancel', 'reopen']);
	});

	it('wants a reason for returning and cancelling', () => {
		for (const kind of ['return', 'cancel'] as const) {
			const next = nextTask(taskIn('submitted'), stepOf(kind, '  '), maintainer);
			expect(next).toMatchObject({ refused: 'invalid' });
		}
	});

	it('is open to all again when whoever had it has left', () => {
		const gone = { assigneeGone: true };
		const open = { state: 'open', assigneeId: null };
		expect(nextTask(taskIn('submitted', gone), stepOf('return'), maintainer)).toEqual(open);
		expect(nextTask(taskIn('accepted', gone), stepOf('reopen'), PRODUCT)).toEqual(open);
	});

	it('keeps its state when it is assigned to the one who has it', () => {
		const same = { kind: 'assign', to: WORKER } as const;
		for (const state of ['in-progress', 'submitted'] as const) {
			expect(nextTask(taskIn(state), same, maintainer)).toEqual({ state, assigneeId: WORKER });
		}
		expect(nextTask(taskIn('accepted'), same, maintainer)).toMatchObject({ refused: 'conflict' });
		expect(nextTask(taskIn('in-progress'), { kind: 'assign', to: null }, maintainer)).toEqual({
			state: 'open',
			assigneeId: null
		});
	});

	it('over any steps by anyone keeps to its rules', () => {
		const person = fc.record({
			id: fc.constantFrom('wren', 'tam', 'mae', 'ola'),
			role: fc.constantFrom(...ROLES)
		});
		const actor = fc.oneof(
			{ weight: 9, arbitrary: person },
			{ weight: 1, arbitrary: fc.constant(PRODUCT) }
		);
		const step = fc.oneof(
			fc.constantFrom(...TASK_STEPS).map((kind) => stepOf(kind)),
			fc.constantFrom('wren', 'tam', null).map((to) => ({ kind: 'assign', to }) as const)
		);
		fc.assert(
			fc.property(fc.array(fc.tuple(step, actor), { maxLength: 40 }), (steps) => {
				let task: TaskFacts = taskIn('open');
				for (const [taken, who] of steps) {
					const next = nextTask(task, taken, who);
					if (isRefused(next)) continue;
					if (taken.kind === 'accept' || taken.kind === 'return') {
						expect(idOf(who)).not.toBe(task.submittedBy);
						expect(task.state).toBe('submitted');
					}
					if (taken.kind === 'reopen') expect(who).toBe(PRODUCT);
					if (!isActiveTask(task.state))
						expect([task.state, taken.kind]).toEqual(['accepted', 'reopen']);
					const kept = taken.kind === 'accept' ? task.submittedBy : null;
					const submittedBy = taken.kind === 'submit' ? idOf(who) : kept;
					task = { ...task, ...next, submittedBy };
					const free = task.state === 'open' || task.state === 'cancelled';
					if (!free) expect(task.assigneeId).not.toBeNull();
					if (task.state === 'open') expect(task.assigneeId).toBeNull();
				}
			}),
			{ numRuns: 1_000 }
		);
	});
});
