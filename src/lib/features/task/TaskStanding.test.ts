import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeTaskView } from '../../../../tests/factories/task-views';
import TaskStanding from './TaskStanding.svelte';

const none = makeTaskView().may;

describe('TaskStanding', () => {
	it('tells whoever submitted that somebody else accepts, and shows no button for it', () => {
		const task = makeTaskView({ state: 'submitted', ownSubmission: true });
		const { container, queryByRole } = render(TaskStanding, { task });
		expect(container.textContent).toContain('somebody else has to accept it');
		expect(queryByRole('button', { name: 'Accept' })).toBeNull();
	});

	it('lets a maintainer accept, or return with a reason', () => {
		const task = makeTaskView({ state: 'submitted', may: { ...none, decide: true } });
		const { container, getByRole } = render(TaskStanding, { task });
		expect(getByRole('button', { name: 'Accept' }).className).toContain('bg-accent');
		const back = container.querySelector('form[action="?/return"]');
		expect(back?.querySelector('textarea[name=reason]')?.hasAttribute('required')).toBe(true);
	});

	it('keeps a reason that was refused, unfolded', () => {
		const task = makeTaskView({ state: 'submitted', may: { ...none, decide: true } });
		const { container } = render(TaskStanding, {
			task,
			refused: {
				door: 'return',
				message: 'Too long',
				issues: [{ field: 'reason', message: 'Too long' }],
				typed: { reason: 'The log stops early.' }
			}
		});
		const details = container.querySelector('form[action="?/return"] details');
		expect(details?.hasAttribute('open')).toBe(true);
		expect(details?.querySelector('textarea')?.value).toBe('The log stops early.');
	});

	it('shows why it came back', () => {
		const task = makeTaskView({ state: 'returned', reason: 'The log stops early.' });
		const { container } = render(TaskStanding, { task });
		expect(container.textContent).toContain('Why it was returned');
		expect(container.textContent).toContain('The log stops early.');
	});
});
