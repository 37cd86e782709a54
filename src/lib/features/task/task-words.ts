import type { SubmissionKind, TaskKind, TaskState } from '../../ledger/tasks';
import type { TaskMark } from '../../schemas/task-views';
import { dayWords as fullDay } from '../../ledger/day-words';

/** `14 Dec`; with its year when that is not this one. */
export function dayWords(day: string, thisYear = new Date().getUTCFullYear()): string {
	const words = fullDay(day);
	return words.endsWith(` ${thisYear}`) ? words.slice(0, -5) : words;
}

/** What a ledger's row says of its task, and of whom: `Due 14 Dec,` `I. Okafor`; `Unassigned`. */
export function markWords(mark: TaskMark, thisYear?: number): readonly [string, string] {
	const { state } = mark;
	const who = mark.assignee ?? '';
	if (state === 'submitted') return [who ? 'Submitted by' : 'Submitted', who];
	if (state === 'returned') return [who ? 'Returned to' : 'Returned', who];
	if (mark.dueOn) {
		const due = mark.overdue ? 'Overdue since' : 'Due';
		return [`${due} ${dayWords(mark.dueOn, thisYear)},`, who || 'unassigned'];
	}
	if (!who) return ['Unassigned', ''];
	return [state === 'in-progress' ? 'In progress,' : 'Assigned to', who];
}

/** What a task of this kind asks somebody to do, and what settles it. */
export const KIND_HINTS: Readonly<Record<TaskKind, string>> = {
	recompute: 'Find the value with another program or method, and say how.',
	'check-derivation': 'Follow the paper’s derivation and say whether it gives what is printed.',
	'find-code': 'Find the program the paper used, or what replaced it.',
	'ask-authors': 'Ask the authors what the printed value means or how it was found.',
	'confirm-transcription':
		'Compare value, place and inequality with the paper. Somebody who did not enter the claim does it.',
	other: 'Say in the instructions what is to be done.'
};

/** What became of a submission once it was accepted. */
const ACCEPTED_WORDS: Readonly<Record<SubmissionKind, string>> = {
	value: 'Done. What was accepted counts for the claim’s verdict where machines leave it open.',
	certificate: 'Done. The certificate counts since its check accepted it.',
	transcription: 'Done. What the comparison found stands on the claim’s page.',
	statement: 'Done. What was found stands on the claim’s page.'
};

/** What happens next in each state, for whoever reads the page. */
export function nextStep(
	state: TaskState,
	assignee: string | null,
	accepted: SubmissionKind | null = null
): string {
	const who = assignee ?? 'Nobody';
	switch (state) {
		case 'open':
			return 'Any member can take it.';
		case 'assigned':
			return `${who} has it and has not begun.`;
		case 'in-progress':
			return `${who} works on it and submits what was found.`;
		case 'submitted':
			return 'A maintainer other than the one who submitted accepts it or returns it with a reason.';
		case 'returned':
			return assignee
				? `${who} looks at it again and submits anew.`
				: 'It came back and waits for somebody to take it.';
		case 'accepted':
			return accepted ? ACCEPTED_WORDS[accepted] : 'Done. What was accepted stands with the claim.';
		case 'cancelled':
			return 'It was called off. Nothing is to be done.';
	}
}

const UNITS = ['bytes', 'kB', 'MB'] as const;

/** `812 bytes`, `1.3 MB` (powers of ten, as the limits are), with a thin space before the unit. */
export function sizeWords(bytes: number): string {
	const step = bytes < 1_000 ? 0 : bytes < 1_000_000 ? 1 : 2;
	const amount = (bytes / 1_000 ** step).toFixed(1).replace(/\.0$/, '');
	return `${amount}\u2009${UNITS[step] ?? ''}`;
}
