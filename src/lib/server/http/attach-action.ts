import { fail, type RequestEvent } from '@sveltejs/kit';
import { TASK_LIMITS } from '../../schemas/task-input';
import { requireRole } from '../auth/guards';
import { ServiceError } from '../errors';
import { attachCertificate } from '../services/submissions/attach-certificate';
import { assertAnswerable } from './action-error';
import { countRequest } from './request-limits';
import { claimNumber } from './route-numbers';
import { typedIn } from './typed-in';

/** Attaches a certificate to the claim of the page; a file counts where nothing is pasted. */
export async function attachAction(event: RequestEvent) {
	const ctx = await requireRole(event, 'observer');
	const number = claimNumber(event.params.number ?? '');
	const data = await event.request.formData();
	const { certificate = '', source = '' } = typedIn(data);
	try {
		await countRequest(event, 'change');
		const text = certificate.trim() || (await textOfFile(data.get('certificateFile')));
		const note = await attachCertificate(ctx, number, { certificate: text, source });
		return { message: `Attached, and checked. ${note}` };
	} catch (thrown) {
		assertAnswerable(thrown);
		const { message, issues } = thrown;
		return fail(thrown.status, { message, issues, attached: { certificate, source } });
	}
}

async function textOfFile(file: FormDataEntryValue | null): Promise<string> {
	if (!(file instanceof File)) return '';
	if (file.size <= TASK_LIMITS.certificate) return file.text();
	const message = `A certificate has at most ${TASK_LIMITS.certificate.toLocaleString('en')} bytes.`;
	throw new ServiceError('too-large', message, [{ field: 'certificate', message }]);
}
