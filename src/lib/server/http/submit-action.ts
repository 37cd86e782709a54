import { submissionInput, TASK_LIMITS } from '../../schemas/task-input';
import { ServiceError } from '../errors';
import { parseInput } from '../services/parse-input';
import { submitTask, type RenamedFile } from '../services/tasks/submit-task';
import { readUploads } from './read-uploads';
import { countRequest } from './request-limits';
import { taskAction } from './task-form';
import { typedIn } from './typed-in';

/** Hands in what was found for the task of the page, with its files. */
export const submitAction = taskAction(
	'submit',
	submittedWords,
	async (ctx, number, data) => {
		const input = parseInput(submissionInput, await submissionFields(data));
		return submitTask(ctx, number, input, await readUploads(data));
	},
	(event) => countRequest(event, 'change')
);

/** What is said once something was handed in; a file that keeps another name is told of. */
export function submittedWords({ renamed }: { readonly renamed: readonly RenamedFile[] }): string {
	const names = renamed.map(({ from, to }) => `“${from}” is kept as “${to}”.`);
	return ['Submitted. Somebody else accepts it or returns it.', ...names].join(' ');
}

/** The fields of a submission; a certificate's file counts where nothing is pasted. */
async function submissionFields(data: FormData): Promise<Record<string, string>> {
	const typed = typedIn(data);
	const file = data.get('certificateFile');
	if (typed.kind !== 'certificate' || typed.certificate?.trim() || !(file instanceof File)) {
		return typed;
	}
	if (file.size > TASK_LIMITS.certificate) {
		const message = `A certificate has at most ${TASK_LIMITS.certificate.toLocaleString('en')} bytes.`;
		throw new ServiceError('too-large', message, [{ field: 'certificate', message }]);
	}
	return { ...typed, certificate: await file.text() };
}
