/** Where uploaded files are: a folder of this machine, or an S3-compatible service. */
export interface FileStore {
	/** Keeps the bytes under a key that was never used before. @throws StorageError */
	put(key: string, bytes: Uint8Array, mediaType: string): Promise<void>;
	/** Null when there is nothing under the key. @throws StorageError */
	get(key: string): Promise<Uint8Array | null>;
	/** Nothing happens when there is nothing under the key. @throws StorageError */
	delete(key: string): Promise<void>;
	/** Every key there is, in no particular order. @throws StorageError */
	keys(): AsyncIterable<string>;
	close(): Promise<void>;
}

/** The storage does not do what it should; the message is for the log, not for people. */
export class StorageError extends Error {
	constructor(message: string, options?: ErrorOptions) {
		super(message, options);
		this.name = 'StorageError';
	}
}

/** A UUID of version 7 as `newId` makes it: nothing a person typed ever becomes a name here. */
const KEY = /^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/;

export const isKey = (text: string): boolean => KEY.test(text);

/** @throws StorageError for anything but a generated key */
export function assertKey(key: string): void {
	if (!isKey(key)) throw new StorageError('The name of a stored file is no generated one.');
}

/** When a key was made: the first 48 bits of a UUID of version 7 are milliseconds (RFC 9562). */
export function timeOfKey(key: string): Date {
	return new Date(Number.parseInt(key.slice(0, 8) + key.slice(9, 13), 16));
}
