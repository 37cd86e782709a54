import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeTaskView } from '../../../../tests/factories/task-views';
import DecideSubmission from './DecideSubmission.svelte';
import TaskStanding from './TaskStanding.svelte';

const none = makeTaskView().may;

describe('TaskStanding', () => {
	it('tells whoever submitted that somebody else accepts, and shows no button for it', () => {
		const task = makeTaskView({ state: 'submitted', ownSubmission: true });
		const { container, queryByRole } = render(TaskStanding, { task });
		expect(container.textContent).toContain('somebody else has to accept it');
		expect(queryByRole('button', { name: 'Accept' })).toBeNull();
	});

	it('lets a maintainer accept, or return with a reason, below what was found', () => {
		const task = makeTaskView({ state: 'submitted', may: { ...none, decide: true } });
		const { container: above } = render(TaskStanding, { task });
		expect(above.querySelector('form')).toBeNull();
		expect(above.querySelector('a[href="#decide"]')).not.toBeNull();
		const { container, getByRole } = render(DecideSubmission, { task });
		expect(getByRole('button', { name: 'Accept' }).className).toContain('bg-accent');
		const words = container.querySelector('form[action="?/accept"] textarea[name=reason]');
		expect(words?.hasAttribute('required')).toBe(false);
		const back = container.querySelector('form[action="?/return"]');
		expect(back?.querySelector('textarea[name=reason]')?.hasAttribute('required')).toBe(true);
	});

	it('keeps a reason that was refused, unfolded', () => {
		const task = makeTaskView({ state: 'submitted', may: { ...none, decide: true } });
		const { container } = render(DecideSubmission, {
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
		const reasonHtml = '<p>The log stops early.</p>';
		const task = makeTaskView({ state: 'returned', reason: 'x', reasonHtml });
		const { container } = render(TaskStanding, { task });
		expect(container.textContent).toContain('Why it was returned');
		expect(container.textContent).toContain('The log stops early.');
	});

	it('names whom a maintainer takes a task back from, and lets its holder give it back', () => {
		const asked = { state: 'in-progress', may: { ...none, release: true } } as const;
		const theirs = render(TaskStanding, { task: makeTaskView({ ...asked, own: false }) });
		expect(theirs.container.textContent).toContain('Take it back from Mo Member');
		const own = render(TaskStanding, { task: makeTaskView({ ...asked, own: true }) });
		expect(own.container.textContent).toContain('Give it back');
	});
});
