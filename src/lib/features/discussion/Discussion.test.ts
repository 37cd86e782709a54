import { fireEvent, render, within } from '@testing-library/svelte';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { CommentView, DiscussionView } from '../../schemas/talk-views';
import Discussion from './Discussion.svelte';

const comment = (over: Partial<CommentView> = {}): CommentView => ({
	id: 'c1',
	author: { id: 'u1', name: 'Wren Aldous' },
	html: '<p>The <em>second</em> line is ours.</p>',
	body: 'The *second* line is ours.',
	at: '2026-12-01T10:00:00.000Z',
	editedAt: null,
	versions: [],
	removedBy: null,
	mayEdit: true,
	mayRemove: true,
	fresh: false,
	...over
});
const discussion = (over: Partial<DiscussionView> = {}): DiscussionView => ({
	subject: 'claim',
	subjectId: 's1',
	comments: [comment()],
	mayComment: true,
	handles: [
		{ handle: 'ines-calder', name: 'Ines Calder' },
		{ handle: 'ines-vale', name: 'Ines Vale' },
		{ handle: 'tam', name: 'Tam Voss' }
	],
	...over
});
const show = (over: Partial<DiscussionView> = {}, refused: object = {}) =>
	render(Discussion, { discussion: discussion(over), group: 'quarry-row', ...refused });

async function type(area: HTMLElement, text: string) {
	if (!(area instanceof HTMLTextAreaElement)) throw new Error('no text area');
	area.value = text;
	area.setSelectionRange(text.length, text.length);
	await fireEvent.input(area);
}

afterEach(() => vi.unstubAllGlobals());

describe('Discussion', () => {
	it('shows who said what when, as the server set it', () => {
		const { getByRole } = show();
		const article = getByRole('article', { name: 'Wren Aldous' });
		expect(within(article).getByText('second').tagName).toBe('EM');
		expect(article.querySelector('time')?.getAttribute('datetime')).toBe(
			'2026-12-01T10:00:00.000Z'
		);
	});

	it('offers the first step where nothing is said, and says who may take it', () => {
		const { getByText, getByRole } = show({ comments: [] });
		expect(getByText(/Nothing is said yet/)).toBeTruthy();
		expect(getByRole('button', { name: 'Comment' })).toBeTruthy();
		const observer = show({ comments: [], mayComment: false });
		expect(observer.getByText(/takes the role of a member/)).toBeTruthy();
		expect(observer.container.querySelector('form')).toBeNull();
	});

	it('takes back what was said of a text once it is changed', async () => {
		const message = 'Write something first.';
		const { getByText, queryByText, container } = show(
			{},
			{ refused: { id: '', body: '', message } }
		);
		expect(getByText(message)).toBeTruthy();
		const area = container.querySelector<HTMLTextAreaElement>('#comment-body-new');
		if (!area) throw new Error('no field');
		await type(area, 'The');
		expect(queryByText(message)).toBeNull();
		expect(area.getAttribute('aria-invalid')).toBeNull();
	});

	it('has forms that work by themselves, each with ids of its own', () => {
		const { container } = show({ comments: [comment(), comment({ id: 'c2' })] });
		const forms = [...container.querySelectorAll('form')];
		expect(forms.map((form) => form.getAttribute('action')?.split('#')[0])).toEqual([
			...['?/edit-comment', '?/remove-comment', '?/edit-comment', '?/remove-comment'],
			'?/comment'
		]);
		expect(forms.every(({ method }) => method === 'post')).toBe(true);
		const ids = [...container.querySelectorAll('[id]')].map(({ id }) => id);
		expect(new Set(ids).size).toBe(ids.length);
		const [edit] = forms;
		expect(edit?.querySelector('textarea')?.value).toBe('The *second* line is ours.');
	});

	it('keeps a refused text in its own form, with what was wrong', () => {
		const refused = { refused: { id: 'c1', body: 'my long text', message: 'Too many comments.' } };
		const { getByLabelText } = show({}, refused);
		const area = getByLabelText('Your comment');
		expect(area).toHaveProperty('value', 'my long text');
		expect(area.closest('details')?.open).toBe(true);
		const described = (area.getAttribute('aria-describedby') ?? '').split(' ');
		const texts = described.map((id) => document.getElementById(id)?.textContent);
		expect(texts.join(' ')).toContain('Too many comments.');
		expect(getByLabelText('Add to it')).toHaveProperty('value', '');
	});

	it('unfolds earlier texts, and says who removed a comment', () => {
		const versions = [
			{ html: '<p>The first line is ours.</p>', until: '2026-12-01T11:00:00.000Z' }
		];
		const { getByText } = show({
			comments: [
				comment({ versions, editedAt: '2026-12-01T11:00:00.000Z' }),
				comment({ id: 'c2', html: '', removedBy: 'Mae Orr', mayEdit: false, mayRemove: false })
			]
		});
		expect(getByText('Earlier text').closest('details')?.textContent).toContain('The first line');
		expect(getByText('Removed by Mae Orr.')).toBeTruthy();
	});
});

describe('mentions', () => {
	it('are offered while an @ is typed, and taken by keyboard', async () => {
		const { getByLabelText, getAllByRole, queryByRole } = show();
		const area = getByLabelText('Add to it');
		expect(queryByRole('listbox')).toBeNull();
		await type(area, 'ask @in');
		const names = () => getAllByRole('option').map(({ textContent }) => textContent?.trim());
		expect(names()).toEqual([
			expect.stringContaining('@ines-calder'),
			expect.stringContaining('@ines-vale')
		]);
		const chosen = () => document.getElementById(area.getAttribute('aria-activedescendant') ?? '');
		expect(chosen()?.textContent).toContain('Ines Calder');
		await fireEvent.keyDown(area, { key: 'ArrowDown' });
		expect(chosen()?.textContent).toContain('Ines Vale');
		expect(chosen()?.getAttribute('aria-selected')).toBe('true');
		await fireEvent.keyDown(area, { key: 'Enter' });
		expect(area).toHaveProperty('value', 'ask @ines-vale ');
		expect(queryByRole('listbox')).toBeNull();
	});

	it('are found by the last name, and left alone after Escape and in addresses', async () => {
		const { getByLabelText, getAllByRole, queryByRole } = show();
		const area = getByLabelText('Add to it');
		await type(area, '@vo');
		expect(getAllByRole('option')).toHaveLength(1);
		await fireEvent.keyDown(area, { key: 'Escape' });
		await type(area, '@vos');
		expect(queryByRole('listbox')).toBeNull();
		await type(area, 'tam@t');
		expect(queryByRole('listbox')).toBeNull();
		await type(area, '@t');
		await fireEvent.click(getAllByRole('option')[0] ?? area);
		expect(area).toHaveProperty('value', '@tam ');
	});
});

describe('the preview', () => {
	it('shows what the server makes of the text, until it changes', async () => {
		const fetched = vi.fn(() => Promise.resolve(Response.json({ html: '<p><b>set</b></p>' })));
		vi.stubGlobal('fetch', fetched);
		const { getByLabelText, findByText, getByRole, queryByText } = show({ comments: [] });
		await type(getByLabelText('Your comment'), 'x');
		await fireEvent.click(getByRole('button', { name: 'Preview' }));
		expect(await findByText('set')).toBeTruthy();
		expect(fetched).toHaveBeenCalledWith(
			'/api/v1/groups/quarry-row/previews',
			expect.objectContaining({ body: '{"text":"x"}' })
		);
		await type(getByLabelText('Your comment'), 'xy');
		expect(queryByText('set')).toBeNull();
	});

	it('warns of a mention of nobody', async () => {
		const answer = { html: '<p>@nob</p>', warnings: ['Nobody is called @nob.'] };
		vi.stubGlobal('fetch', () => Promise.resolve(Response.json(answer)));
		const { getByLabelText, findByText, getByRole } = show({ comments: [] });
		await type(getByLabelText('Your comment'), '@nob');
		await fireEvent.click(getByRole('button', { name: 'Preview' }));
		expect(await findByText('Nobody is called @nob.')).toBeTruthy();
	});

	it('says when there is none', async () => {
		vi.stubGlobal('fetch', () => Promise.reject(new TypeError('offline')));
		const { getByLabelText, findByText, getByRole } = show({ comments: [] });
		await type(getByLabelText('Your comment'), 'x');
		await fireEvent.click(getByRole('button', { name: 'Preview' }));
		expect(await findByText(/can’t be reached/)).toBeTruthy();
		expect(getByLabelText('Your comment')).toHaveProperty('value', 'x');
	});
});
