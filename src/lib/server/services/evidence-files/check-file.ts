import { fileTypeFromBuffer } from 'file-type';
import { TASK_LIMITS } from '../../../schemas/task-input';
import { cleanName } from './clean-name';
import { DATA_NAMES, isDataOf } from './data-signatures';
import { ACCEPTED_NAMES, extensionOf, kindOfName, type FileKind } from './file-kinds';

export interface UploadedFile {
	/** As the browser sent it; may be anything. */
	readonly name: string;
	readonly bytes: Uint8Array;
}

export interface CheckedFile {
	/** The name it keeps. */
	readonly name: string;
	readonly mediaType: string;
	readonly bytes: Uint8Array;
}

export interface RefusedFile {
	readonly problem: string;
	readonly tooLarge?: true;
}

const megabytes = (bytes: number) =>
	(Math.ceil(bytes / 100_000) / 10).toLocaleString('en', { maximumFractionDigits: 1 });

/** Whether a file may be kept, by its size, its name's ending and its content. */
export async function checkFile(
	{ name: given, bytes }: UploadedFile,
	place: number
): Promise<CheckedFile | RefusedFile> {
	const name = cleanName(given);
	if (name === null) {
		return { problem: `File ${place} has no usable name: give it one and attach it again.` };
	}
	const called = `“${name}”`;
	if (bytes.byteLength === 0) {
		return { problem: `${called} is empty: attach the file with its content.` };
	}
	if (bytes.byteLength > TASK_LIMITS.fileBytes) {
		const [has, most] = [megabytes(bytes.byteLength), megabytes(TASK_LIMITS.fileBytes)];
		const what = `${called} has ${has} MB, a file may have ${most} MB`;
		return { problem: `${what}: compress it, or say where it can be found.`, tooLarge: true };
	}
	const kind = kindOfName(name);
	if (!kind) {
		const ending = extensionOf(name);
		const what = ending ? `ends in .${ending}, which is not taken` : 'has no ending';
		return { problem: `${called} ${what}. Taken are ${ACCEPTED_NAMES}; others in a .zip.` };
	}
	const problem = await problemOf(bytes, kind);
	return problem ? { problem: `${called} ${problem}` } : { name, mediaType: kind.mediaType, bytes };
}

function problemOf(bytes: Uint8Array, kind: FileKind): string | null | Promise<string | null> {
	switch (kind.kind) {
		case 'text':
			return textProblem(bytes);
		case 'binary':
			return binaryProblem(bytes, kind);
		case 'data':
			if (isDataOf(kind.format, bytes)) return null;
			return `is not ${DATA_NAMES[kind.format]}, although its ending says so: give it the ending of what it is.`;
	}
}

/** A text is read as UTF-8 by whoever opens it, or it is no text. */
function textProblem(bytes: Uint8Array): string | null {
	if (bytes.includes(0)) {
		return 'is no plain text, although its ending says so: it holds a NUL. Pack it into a .zip.';
	}
	try {
		new TextDecoder('utf-8', { fatal: true }).decode(bytes);
		return null;
	} catch {
		return 'is not in UTF-8: save it in that encoding, or pack it into a .zip.';
	}
}

async function binaryProblem(
	bytes: Uint8Array,
	{ mediaType }: { readonly mediaType: string }
): Promise<string | null> {
	const found = await fileTypeFromBuffer(bytes).catch(() => undefined);
	if (found?.mime === mediaType) return null;
	const says = found ? `holds ${found.mime}` : 'holds something else';
	return `${says}, although its ending says ${mediaType}: give it the ending of what it is.`;
}
