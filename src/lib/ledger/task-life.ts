import { may, type Action } from './policy';
import type { Role } from './roles';
import { ACTIVE_TASK_STATES, TASK_STATE_LABELS, isActiveTask, type TaskState } from './tasks';

/** What decides on a task's next state. */
export interface TaskFacts {
	readonly state: TaskState;
	readonly assigneeId: string | null;
	/** Whose submission is waiting or was accepted; null: there is none. */
	readonly submittedBy: string | null;
	/** The assignee can't work on it any more: left the group, or only observes now. */
	readonly assigneeGone: boolean;
}

export interface TaskPerson {
	readonly id: string;
	readonly role: Role;
}

/** The product itself: a claim was withdrawn, a member left, a certificate contradicts. */
export const PRODUCT = 'product';
export type TaskActor = TaskPerson | typeof PRODUCT;

export type TaskStep =
	| { readonly kind: 'take' | 'start' | 'release' | 'submit' | 'accept' | 'reopen' }
	| { readonly kind: 'return' | 'cancel'; readonly reason: string }
	/** By a maintainer, to whom it shall be; null: open to all. */
	| { readonly kind: 'assign'; readonly to: string | null };
export type TaskStepKind = TaskStep['kind'];

export const TASK_STEPS = [
	'take',
	'start',
	'release',
	'submit',
	'accept',
	'return',
	'cancel',
	'assign',
	'reopen'
] as const satisfies readonly TaskStepKind[];

export interface NextTask {
	readonly state: TaskState;
	readonly assigneeId: string | null;
}

export interface TaskRefusal {
	/** `conflict`: the task is in another state; `invalid`: the reason is missing. */
	readonly refused: 'forbidden' | 'conflict' | 'invalid';
	/** A sentence for a person. */
	readonly message: string;
}

const POSSIBLE: Readonly<Record<TaskStepKind, readonly TaskState[]>> = {
	take: ['open'],
	start: ['assigned', 'returned'],
	release: ['assigned', 'in-progress', 'returned'],
	submit: ['open', 'assigned', 'in-progress', 'returned'],
	accept: ['submitted'],
	return: ['submitted'],
	cancel: ACTIVE_TASK_STATES,
	assign: ['open', 'assigned', 'in-progress', 'returned'],
	reopen: ['accepted']
};

const NEEDS: Readonly<Record<Exclude<TaskStepKind, 'reopen'>, Action>> = {
	take: 'take-task',
	start: 'work-on-task',
	release: 'release-task',
	submit: 'work-on-task',
	accept: 'decide-task',
	return: 'decide-task',
	cancel: 'cancel-task',
	assign: 'edit-task'
};

const WORD: Readonly<Record<TaskStepKind, string>> = {
	take: 'taken',
	start: 'started',
	release: 'given back',
	submit: 'submitted',
	accept: 'accepted',
	return: 'returned',
	cancel: 'cancelled',
	assign: 'assigned anew',
	reopen: 'reopened'
};

/** All that the product does of its own accord. */
const PRODUCTS: readonly TaskStepKind[] = ['release', 'cancel', 'reopen'];

/** The state of a task that has just been opened. */
export const firstState = (assigneeId: string | null): TaskState =>
	assigneeId === null ? 'open' : 'assigned';

/** The next state of a task, or why the step is refused. The only place that knows a task's life. */
export function nextTask(task: TaskFacts, step: TaskStep, who: TaskActor): NextTask | TaskRefusal {
	const refusal = roleRefusal(step, who) ?? stateRefusal(task, step) ?? ownRefusal(task, step, who);
	if (refusal) return refusal;
	if ('reason' in step && !step.reason.trim()) {
		return { refused: 'invalid', message: 'Give a reason, so that it is known what to do next.' };
	}
	const { assigneeId } = task;
	switch (step.kind) {
		case 'take':
			return { state: 'assigned', assigneeId: idOf(who) };
		case 'start':
			return { state: 'in-progress', assigneeId };
		case 'release':
			return { state: 'open', assigneeId: null };
		case 'submit':
			return { state: 'submitted', assigneeId: assigneeId ?? idOf(who) };
		case 'accept':
			return { state: 'accepted', assigneeId };
		case 'return':
		case 'reopen':
			return task.assigneeGone || assigneeId === null
				? { state: 'open', assigneeId: null }
				: { state: 'returned', assigneeId };
		case 'cancel':
			return { state: 'cancelled', assigneeId };
		case 'assign':
			return step.to === assigneeId
				? { state: task.state, assigneeId }
				: { state: firstState(step.to), assigneeId: step.to };
	}
}

export function isRefused(next: NextTask | TaskRefusal): next is TaskRefusal {
	return 'refused' in next;
}

/** Whether the step is open to this person now. */
export function mayStep(task: TaskFacts, step: TaskStep, who: TaskActor): boolean {
	return !isRefused(nextTask(task, step, who));
}

const idOf = (who: TaskActor): string | null => (who === PRODUCT ? null : who.id);

/** A role that never suffices, whatever the task's state. */
function roleRefusal(step: TaskStep, who: TaskActor): TaskRefusal | null {
	if (who === PRODUCT) {
		const own = PRODUCTS.some((kind) => kind === step.kind);
		return own ? null : forbidden(`A task is ${WORD[step.kind]} by a person.`);
	}
	if (step.kind === 'reopen') {
		return forbidden('An accepted task is reopened by a certificate only; open another one.');
	}
	const action = NEEDS[step.kind];
	const ever = [true, false].some((own) => may(who.role, action, { own }));
	if (ever) return null;
	return may(who.role, 'take-task')
		? forbidden(`A task is ${WORD[step.kind]} by a maintainer.`)
		: forbidden('Working on tasks takes the role of a member.');
}

/** A step that is skipped or comes too late. */
function stateRefusal({ state, assigneeId }: TaskFacts, step: TaskStep): TaskRefusal | null {
	if (POSSIBLE[step.kind].includes(state)) return null;
	// Leaving it with whoever has it changes nothing, also while it waits to be accepted.
	if (step.kind === 'assign' && step.to === assigneeId && isActiveTask(state)) return null;
	const now = TASK_STATE_LABELS[state].toLowerCase();
	const message = `The task is ${now} now, so it can’t be ${WORD[step.kind]}.`;
	return { refused: 'conflict', message };
}

function ownRefusal(task: TaskFacts, step: TaskStep, who: TaskActor): TaskRefusal | null {
	if (who === PRODUCT || step.kind === 'reopen') return null;
	// Submitting an open task takes it.
	if (step.kind === 'submit' && task.state === 'open') {
		return may(who.role, 'take-task') ? null : forbidden('Take the task first.');
	}
	const decides = step.kind === 'accept' || step.kind === 'return';
	const own = (decides ? task.submittedBy : task.assigneeId) === who.id;
	if (may(who.role, NEEDS[step.kind], { own })) return null;
	return forbidden(
		decides
			? 'This submission is yours: somebody else accepts or returns it.'
			: `A task is ${WORD[step.kind]} by whoever it is assigned to${step.kind === 'release' ? ' or by a maintainer' : ''}.`
	);
}

const forbidden = (message: string): TaskRefusal => ({ refused: 'forbidden', message });
