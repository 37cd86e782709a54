import { may } from '../../ledger/policy';
import type { Role } from '../../ledger/roles';
import { isActiveTask } from '../../ledger/tasks';
import type { TaskRow, TaskView } from '../../schemas/task-views';

export type MoveKey = 'take' | 'start' | 'release' | 'accept' | 'return' | 'cancel';

export interface Move {
	readonly key: MoveKey;
	readonly label: string;
	/** It takes a reason, which is asked for under this question. */
	readonly asks?: string;
}

const MOVES: readonly Move[] = [
	{ key: 'take', label: 'Take it' },
	{ key: 'start', label: 'Start' },
	{ key: 'release', label: 'Give it back' },
	{ key: 'accept', label: 'Accept' },
	{ key: 'return', label: 'Return it', asks: 'What is missing or wrong' },
	{ key: 'cancel', label: 'Cancel it', asks: 'Why it is called off' }
];

/** What the actions of a task's page are called, for those the server allows. */
export function movesAllowed({ take, start, release, decide, cancel }: TaskView['may']): Move[] {
	const allowed = { take, start, release, accept: decide, return: decide, cancel };
	return MOVES.filter(({ key }) => allowed[key]);
}

/**
 * The same for a row of a list, by role and state. The server decides again: it alone knows who
 * submitted.
 */
export function movesOf(row: TaskRow, role: Role, self: string): Move[] {
	const own = row.assignee?.id === self;
	const working = ['assigned', 'in-progress', 'returned'].includes(row.state);
	const decide = row.state === 'submitted' && may(role, 'decide-task', { own });
	return movesAllowed({
		take: row.assignee === null && isActiveTask(row.state) && may(role, 'take-task'),
		start: working && row.state !== 'in-progress' && may(role, 'work-on-task', { own }),
		submit: working && may(role, 'work-on-task', { own }),
		release: working && row.assignee !== null && may(role, 'release-task', { own }),
		decide,
		edit: isActiveTask(row.state) && may(role, 'edit-task'),
		cancel: isActiveTask(row.state) && may(role, 'cancel-task')
	});
}
