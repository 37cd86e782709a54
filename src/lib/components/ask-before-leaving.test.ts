import type { BeforeNavigate } from '@sveltejs/kit';
import { afterEach, expect, it, vi } from 'vitest';
import { askBeforeLeaving } from './ask-before-leaving';

const listeners = vi.hoisted(() => [] as ((leaving: BeforeNavigate) => void)[]);
vi.mock('$app/navigation', () => ({
	beforeNavigate: (listener: (leaving: BeforeNavigate) => void) => listeners.push(listener)
}));
afterEach(() => {
	listeners.length = 0;
	vi.restoreAllMocks();
});

const at = (path: string) => ({ url: new URL(path, 'https://merestone.example') });
/** Leaves a task's page; says whether it was held back and how often somebody was asked. */
function leave(answer: boolean, to = '/g/a', over: object = {}) {
	const confirm = vi.spyOn(window, 'confirm').mockReturnValue(answer);
	const cancel = vi.fn();
	const leaving = { type: 'link', willUnload: false, from: at('/g/a/tasks/1'), to: at(to), cancel };
	for (const listener of listeners) listener({ ...leaving, ...over } as unknown as BeforeNavigate);
	return { held: cancel.mock.calls.length > 0, asked: confirm.mock.calls.length };
}

it('asks while something is unsent, and lets go of what is given up', () => {
	let unsent = false;
	askBeforeLeaving(() => unsent);
	expect(leave(false)).toEqual({ held: false, asked: 0 });
	unsent = true;
	expect(leave(false)).toEqual({ held: true, asked: 1 });
	vi.restoreAllMocks();
	expect(leave(true)).toEqual({ held: false, asked: 1 });
});

it('does not ask for another address of the same page, nor in words of its own when the tab closes', () => {
	askBeforeLeaving(() => true);
	expect(leave(false, '/g/a/tasks/1?sort=due#comment-1')).toEqual({ held: false, asked: 0 });
	expect(leave(false, '/', { type: 'leave', willUnload: true, to: null })).toEqual({
		held: true,
		asked: 0
	});
});

it('asks once for all forms of a page', () => {
	askBeforeLeaving(() => true);
	askBeforeLeaving(() => true);
	const confirm = vi.spyOn(window, 'confirm').mockReturnValue(true);
	const leaving = {
		type: 'link',
		willUnload: false,
		from: at('/a'),
		to: at('/b'),
		cancel: vi.fn()
	};
	const one = leaving as unknown as BeforeNavigate;
	for (const listener of listeners) listener(one);
	expect(confirm).toHaveBeenCalledOnce();
});
