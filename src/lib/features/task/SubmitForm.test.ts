import { fireEvent, render, waitFor, within } from '@testing-library/svelte';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { makeSubmission, makeTaskView } from '../../../../tests/factories/task-views';
import { makeClaimView } from '../../../../tests/factories/claim-view';
import SubmitForm from './SubmitForm.svelte';

afterEach(() => vi.unstubAllGlobals());

const task = makeTaskView();
const claim = makeClaimView();

describe('SubmitForm', () => {
	it('sends files with the fields, and offers what the task can be answered with', () => {
		const { container, getAllByRole } = render(SubmitForm, { task, claim });
		const form = container.querySelector('form');
		expect(form?.enctype).toBe('multipart/form-data');
		expect(form?.getAttribute('action')).toBe('?/submit');
		const kinds = getAllByRole('radio').map((radio) => radio.getAttribute('value'));
		expect(kinds).toEqual(['value', 'certificate', 'statement']);
		expect(container.querySelector<HTMLInputElement>('[name=kind]:checked')?.value).toBe('value');
	});

	it('says how the value is read while it is typed, as the server reads it', async () => {
		const asked = vi.fn(async (_address: string, _request: { readonly body: string }) =>
			Response.json({ value: 'Read as 0.25075 to 0.25085', issues: [] })
		);
		vi.stubGlobal('fetch', asked);
		const { getByLabelText, container } = render(SubmitForm, { task, claim });
		await fireEvent.input(getByLabelText('Value you found'), { target: { value: '0.2508' } });
		await waitFor(() => expect(container.textContent).toContain('Read as 0.25075 to 0.25085'));
		const [address, request] = asked.mock.calls.at(-1) ?? [];
		expect(address).toBe('/api/v1/readings');
		expect(JSON.parse(request?.body ?? '')).toEqual({
			group: 'a',
			printed: '0.2508',
			relation: '='
		});
	});

	it('says which version of the claim it was opened beside, whatever the page hears of later', async () => {
		const { container, rerender } = render(SubmitForm, {
			task,
			claim: { ...claim, version: 3 }
		});
		const seen = () => container.querySelector<HTMLInputElement>('[name=claimVersion]')?.value;
		expect(seen()).toBe('3');
		await rerender({ claim: { ...claim, version: 4 } });
		expect(seen()).toBe('3');
	});

	it('keeps everything typed and puts each sentence at its field', () => {
		const message = 'Give the program’s version, or the day or commit where it has none.';
		const { getByLabelText, getByRole } = render(SubmitForm, {
			task,
			claim,
			refused: {
				message,
				issues: [{ field: 'programVersion', message }],
				typed: { kind: 'value', printed: '0.2508', program: 'Own script', comment: 'As told.' }
			}
		});
		expect(getByLabelText('Value you found')).toHaveProperty('value', '0.2508');
		expect(getByLabelText('Program')).toHaveProperty('value', 'Own script');
		expect(getByLabelText('Comment')).toHaveProperty('value', 'As told.');
		expect(getByLabelText('Version').getAttribute('aria-invalid')).toBe('true');
		expect(getByRole('alert').textContent).toContain('marked below');
	});

	it('starts a further try with how the one before was made, not with its value', () => {
		const again = makeTaskView({
			state: 'returned',
			submissions: [
				makeSubmission({ state: 'returned', relation: '<=', comment: 'Seeds 1 to 20.' })
			]
		});
		const value = (form: typeof again, label: string) => {
			const { getByLabelText, unmount } = render(SubmitForm, { task: form, claim });
			const field = getByLabelText(label);
			unmount();
			return 'value' in field ? field.value : null;
		};
		const labels = ['Program', 'Version', 'Method', 'Relation', 'Comment', 'Value you found'];
		expect(labels.map((label) => value(again, label))).toEqual([
			...['Own script', '1.2', 'level 3', '<=', 'Seeds 1 to 20.', '']
		]);
		// Somebody else begins afresh.
		const theirs = { ...again, assignee: { id: 'ida', name: 'Ida Member' } };
		expect(labels.map((label) => value(theirs, label))).toEqual(['', '', '', '=', '', '']);
	});

	it('asks three questions beside what was entered', () => {
		const { getByRole } = render(SubmitForm, {
			task: makeTaskView({ kind: 'confirm-transcription', submissionKinds: ['transcription'] }),
			claim
		});
		for (const question of [/value printed so/, /stand there/, /this inequality and quantity/]) {
			const group = getByRole('group', { name: question });
			expect(within(group).getAllByRole('radio')).toHaveLength(2);
			expect(group.parentElement?.textContent).toMatch(/2\.8284|eq\. 7|CHSH/);
		}
	});
});
