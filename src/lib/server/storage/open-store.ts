import { config } from '../config';
import type { FileStore } from './file-store';
import { readStoreUrl } from './store-url';

/**
 * Opens what FILES_URL names. The SDK is loaded only where it is needed.
 * @throws Error when the folder can't be used
 */
export async function openStore(url: string): Promise<FileStore> {
	const place = readStoreUrl(url);
	if (place.kind === 'disk') {
		const { createDiskStore } = await import('./disk-store');
		return createDiskStore(place.folder);
	}
	const { createS3Store } = await import('./s3-store');
	return createS3Store(place);
}

/** On globalThis, because the development server evaluates this module anew after a change. */
const holder: { merestoneFiles?: Promise<FileStore> | undefined } = globalThis as never;

/** The storage of this process; opened at the first call. */
export async function fileStore(): Promise<FileStore> {
	holder.merestoneFiles ??= openStore(config().filesUrl);
	try {
		return await holder.merestoneFiles;
	} catch (error) {
		holder.merestoneFiles = undefined;
		throw error;
	}
}

/** Tests and scripts bring their own. */
export function setFileStore(store: FileStore): void {
	holder.merestoneFiles = Promise.resolve(store);
}

export async function closeFileStore(): Promise<void> {
	const store = holder.merestoneFiles;
	holder.merestoneFiles = undefined;
	await (await store)?.close();
}
