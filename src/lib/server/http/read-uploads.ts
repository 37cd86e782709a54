import type { UploadedFile } from '../services/evidence-files/check-file';

/** The files of a form's field; a field left empty arrives as a file without name and bytes. */
export async function readUploads(form: FormData, field = 'files'): Promise<UploadedFile[]> {
	const files = form
		.getAll(field)
		.filter((entry) => entry instanceof File)
		.filter(({ name, size }) => name !== '' || size > 0);
	return Promise.all(
		files.map(async (file) => ({
			name: file.name,
			bytes: new Uint8Array(await file.arrayBuffer())
		}))
	);
}
