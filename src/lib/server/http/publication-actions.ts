import { fail, type RequestEvent } from '@sveltejs/kit';
import { noticeInput } from '../../schemas/publication-input';
import { transcriptionInput } from '../../schemas/task-input';
import { requireRole } from '../auth/guards';
import { handleAuthorMessage } from '../services/author-messages/handle-author-message';
import { reopenAuthorMessage } from '../services/author-messages/reopen-author-message';
import { attachNotice } from '../services/claim-notices/attach-notice';
import { removeNotice } from '../services/claim-notices/remove-notice';
import { parseInput } from '../services/parse-input';
import { confirmTranscription } from '../services/transcriptions/confirm-transcription';
import { assertAnswerable } from './action-error';
import { claimAction } from './claim-action';
import { countRequest } from './request-limits';
import { claimNumber } from './route-numbers';

/** Who asks, of which claim, with which fields. */
async function asked(event: RequestEvent) {
	const ctx = await requireRole(event, 'observer');
	const number = claimNumber(event.params.number ?? '');
	const data = await event.request.formData();
	return { ctx, number, text: (name: string) => String(data.get(name) ?? '') };
}

const idOf = (data: FormData) => String(data.get('id') ?? '');

/** What is wrong beside what was typed, which the page then shows again. */
function failTyped<K extends string, T>(thrown: unknown, key: K, typed: T) {
	assertAnswerable(thrown);
	const { message, issues } = thrown;
	return fail(thrown.status, { message, issues, [key]: typed } as {
		message: string;
		issues: typeof issues;
	} & Record<K, T>);
}

/** Actions of a claim's page: comparing it with the paper, errata, what authors write. */
export const publicationActions = {
	confirm: async (event: RequestEvent) => {
		const { ctx, number, text } = await asked(event);
		const typed = {
			valueMatches: text('valueMatches'),
			locatorMatches: text('locatorMatches'),
			inequalityMatches: text('inequalityMatches'),
			note: text('note')
		};
		try {
			const input = parseInput(transcriptionInput, { ...typed, version: text('version') });
			const { confirmed } = await confirmTranscription(ctx, number, input);
			const message = confirmed
				? 'Recorded: value, locator and inequality are the paper’s.'
				: 'Recorded. Whoever entered the claim is told what is wrong.';
			return { message };
		} catch (thrown) {
			return failTyped(thrown, 'comparison', typed);
		}
	},
	attachNotice: async (event: RequestEvent) => {
		const { ctx, number, text } = await asked(event);
		const typed = {
			kind: text('kind'),
			referenceId: text('referenceId'),
			bibtex: text('bibtex'),
			note: text('note')
		};
		try {
			// Reading an entry takes a thread's time.
			await countRequest(event, 'change');
			await attachNotice(ctx, number, parseInput(noticeInput, typed));
			return { message: 'Attached.' };
		} catch (thrown) {
			return failTyped(thrown, 'notice', typed);
		}
	},
	removeNotice: claimAction(
		'Removed. The paper stays among the group’s references.',
		(ctx, number, data) => removeNotice(ctx, number, idOf(data))
	),
	handleMessage: claimAction('Marked as dealt with.', (ctx, _number, data) =>
		handleAuthorMessage(ctx, idOf(data))
	),
	reopenMessage: claimAction('Taken up again.', (ctx, _number, data) =>
		reopenAuthorMessage(ctx, idOf(data))
	)
};
