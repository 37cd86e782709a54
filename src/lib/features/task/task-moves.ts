import type { Role } from '../../ledger/roles';
import { mayStep, type TaskStep } from '../../ledger/task-life';
import type { TaskRow, TaskView } from '../../schemas/task-views';

export type MoveKey = 'take' | 'start' | 'release' | 'accept' | 'return' | 'cancel';

export interface Move {
	readonly key: MoveKey;
	readonly label: string;
	/** It takes a reason, which is asked for under this question. */
	readonly asks?: string;
	/** Belongs to what was found: who decides has read it first. */
	readonly decides?: true;
}

const MOVES: readonly Move[] = [
	{ key: 'take', label: 'Take it' },
	{ key: 'start', label: 'Start' },
	{ key: 'release', label: 'Give it back' },
	{ key: 'accept', label: 'Accept', decides: true },
	{ key: 'return', label: 'Return it', asks: 'What is missing or wrong', decides: true },
	{ key: 'cancel', label: 'Cancel it', asks: 'Why it is called off' }
];

/**
 * What the actions of a task's page are called, for those the server allows.
 * @param holder who has the task, when that is somebody else than the viewer
 */
export function movesAllowed(
	may: Pick<TaskView['may'], 'take' | 'start' | 'release' | 'decide' | 'cancel'>,
	holder: string | null
): Move[] {
	const { take, start, release, decide, cancel } = may;
	const allowed = { take, start, release, accept: decide, return: decide, cancel };
	return MOVES.filter(({ key }) => allowed[key]).map((move) =>
		move.key === 'release' && holder ? { ...move, label: `Take it back from ${holder}` } : move
	);
}

/**
 * The same for a row of a list, by role and state. Whoever has a submitted task is taken for the one
 * who submitted; the server, which knows, decides again.
 */
export function movesOf(row: TaskRow, role: Role, id: string): Move[] {
	const assigneeId = row.assignee?.id ?? null;
	const { state } = row;
	const submittedBy = state === 'submitted' ? assigneeId : null;
	const facts = { state, assigneeId, submittedBy, assigneeGone: false };
	const can = (step: TaskStep) => mayStep(facts, step, { id, role });
	const allowed = {
		take: can({ kind: 'take' }),
		start: can({ kind: 'start' }),
		release: can({ kind: 'release' }),
		decide: can({ kind: 'accept' }),
		cancel: can({ kind: 'cancel', reason: 'asked for in the form' })
	};
	return movesAllowed(allowed, assigneeId === id ? null : (row.assignee?.name ?? null));
}
