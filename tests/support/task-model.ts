import { isActiveTask, type TaskState } from '../../src/lib/ledger/tasks';

/** What tests know of a task's life; written down apart from the product's own rule. */
export const PEOPLE = ['observer', 'member', 'wren', 'maintainer', 'owner'] as const;
export type Who = (typeof PEOPLE)[number];
export const leads = (who: Who) => who === 'maintainer' || who === 'owner';

export interface Known {
	state: TaskState;
	holder: Who | null;
	submitter: Who | null;
	/** Changes that were let through, opening included. */
	changes: number;
}

export const DOINGS = [
	'take',
	'start',
	'release',
	'submit',
	'accept',
	'return',
	'cancel',
	'give'
] as const;
export type Doing = (typeof DOINGS)[number];

export interface Step {
	readonly doing: Doing;
	readonly who: Who;
	readonly to: Who | null;
	/** Which of the run's tasks. */
	readonly pick: number;
}

const onlyObserver = (who: Who) => who === 'observer';

/**
 * The task afterwards; null: it has to be refused.
 * @param idle who can't work on tasks at present
 */
export function stepped(
	task: Known,
	{ doing, who, to }: Step,
	idle: (who: Who) => boolean = onlyObserver
): Omit<Known, 'changes'> | null {
	const { state, holder, submitter } = task;
	const held = state === 'assigned' || state === 'in-progress' || state === 'returned';
	const mine = holder === who && !idle(who);
	switch (doing) {
		case 'take':
			return state === 'open' && !idle(who)
				? { state: 'assigned', holder: who, submitter: null }
				: null;
		case 'start':
			return mine && (state === 'assigned' || state === 'returned')
				? { state: 'in-progress', holder, submitter: null }
				: null;
		case 'release':
			return held && (mine || leads(who)) ? { state: 'open', holder: null, submitter: null } : null;
		case 'submit':
			return (held && mine) || (state === 'open' && !idle(who))
				? { state: 'submitted', holder: who, submitter: who }
				: null;
		case 'accept':
			return state === 'submitted' && leads(who) && submitter !== who
				? { state: 'accepted', holder, submitter }
				: null;
		case 'return':
			return state === 'submitted' && leads(who) && submitter !== who ? backTo(holder, idle) : null;
		case 'cancel':
			return isActiveTask(state) && leads(who)
				? { state: 'cancelled', holder, submitter: null }
				: null;
		case 'give': {
			if (!leads(who) || !isActiveTask(state)) return null;
			if (to === holder) return { state, holder, submitter };
			if (state === 'submitted' || (to !== null && idle(to))) return null;
			return { state: to === null ? 'open' : 'assigned', holder: to, submitter: null };
		}
	}
}

/** Sent back to who has it; to all when that person can't work on it any more. */
export function backTo(holder: Who | null, idle: (who: Who) => boolean): Omit<Known, 'changes'> {
	return holder === null || idle(holder)
		? { state: 'open', holder: null, submitter: null }
		: { state: 'returned', holder, submitter: null };
}
