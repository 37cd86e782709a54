import type { HomeView } from '../../schemas/talk-views';

const counted = (number: number, one: string, many: string) =>
	number === 0 ? [] : [`${number} ${number === 1 ? one : many}`];

/** `3 tasks, 1 of them overdue. 2 submissions wait for you.` What there is, nothing of what is not. */
export function homeSentence({ totals, groups }: Pick<HomeView, 'totals' | 'groups'>): string {
	if (groups.length === 0) return 'What concerns you in your groups.';
	const overdue = totals.overdue > 0 ? `, ${totals.overdue} of them overdue` : '';
	const sentences = [
		...counted(totals.tasks, 'task of yours', 'tasks of yours').map((text) => text + overdue),
		...counted(totals.toDecide, 'submission waits for you', 'submissions wait for you'),
		...counted(
			totals.discrepancies,
			'discrepancy stands in your groups',
			'discrepancies stand in your groups'
		)
	];
	return sentences.length > 0 ? `${sentences.join('. ')}.` : 'Nothing waits for you.';
}
