import { render, screen } from '@testing-library/svelte';
import { expect, it } from 'vitest';
import type { ActivityEntry as Entry } from '../../schemas/talk-views';
import ActivityEntry from './ActivityEntry.svelte';

it('shows each change, also where two fields go by one name', () => {
	const entry: Entry = {
		id: 'a1',
		at: '2026-11-20T10:00:00.000Z',
		who: 'Wren Adeyo',
		text: 'submitted a value for task 2',
		href: null,
		kind: 'tasks',
		changes: [
			{ field: 'Submission', before: '', after: 'value' },
			{ field: 'Submission', before: '', after: 'waiting' }
		],
		requestId: 'r1'
	};
	render(ActivityEntry, { entry });
	expect(screen.getAllByText('Submission')).toHaveLength(2);
	expect(screen.getByText('waiting')).toBeTruthy();
});
