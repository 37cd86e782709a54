import { randomBytes } from 'node:crypto';
import { mkdir, open, readFile, readdir, rename, rm, stat } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { StorageError, assertKey, isKey, type FileStore } from './file-store';

const isMissing = (error: unknown) =>
	error instanceof Error && 'code' in error && error.code === 'ENOENT';

/** Files being written, outside the folders that `keys` walks. */
const TEMPORARY = 'tmp';

/**
 * Files in a folder of this machine, two levels of folders deep. The levels come from a key's last
 * characters, which are random: its first ones are the time and would fill one folder at a time.
 * @throws Error when the folder can't be made
 */
export async function createDiskStore(folder: string): Promise<FileStore> {
	await mkdir(join(folder, TEMPORARY), { recursive: true });

	const pathOf = (key: string) => {
		assertKey(key);
		return join(folder, key.slice(-2), key.slice(-4, -2), key);
	};

	return {
		async put(key, bytes) {
			const path = pathOf(key);
			const temporary = join(folder, TEMPORARY, `${key}-${randomBytes(4).toString('hex')}`);
			await onDisk('writing', async () => {
				await mkdir(dirname(path), { recursive: true });
				try {
					await writeThrough(temporary, bytes);
					await rename(temporary, path);
					await syncFolder(dirname(path));
				} catch (error) {
					await rm(temporary, { force: true });
					throw error;
				}
			});
		},
		async get(key) {
			const path = pathOf(key);
			return onDisk('reading', async () => {
				try {
					return new Uint8Array(await readFile(path));
				} catch (error) {
					if (isMissing(error)) return null;
					throw error;
				}
			});
		},
		async delete(key) {
			const path = pathOf(key);
			await onDisk('deleting', () => rm(path, { force: true }));
		},
		async *keys() {
			for (const first of await foldersIn(folder)) {
				for (const second of await foldersIn(join(folder, first))) {
					const names = await onDisk('listing', () => readdir(join(folder, first, second)));
					yield* names.filter(isKey);
				}
			}
		},
		close: () => Promise.resolve()
	};
}

/** Only when the bytes are on the disk may the name appear. */
async function writeThrough(path: string, bytes: Uint8Array): Promise<void> {
	const file = await open(path, 'wx', 0o600);
	try {
		await file.writeFile(bytes);
		await file.sync();
	} finally {
		await file.close();
	}
}

/** A rename survives a power failure only once its folder is written too. */
async function syncFolder(path: string): Promise<void> {
	const folder = await open(path, 'r');
	try {
		await folder.sync();
	} finally {
		await folder.close();
	}
}

async function foldersIn(path: string): Promise<string[]> {
	return onDisk('listing', async () => {
		if (!(await stat(path)).isDirectory()) return [];
		return (await readdir(path)).filter((name) => /^[0-9a-f]{2}$/.test(name));
	});
}

async function onDisk<T>(what: string, work: () => Promise<T>): Promise<T> {
	try {
		return await work();
	} catch (error) {
		throw new StorageError(`${what} a stored file failed`, { cause: error });
	}
}
