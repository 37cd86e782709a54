import { existsSync, mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { newId } from '../../src/lib/server/ids';
import { createDiskStore } from '../../src/lib/server/storage/disk-store';
import { StorageError, timeOfKey, type FileStore } from '../../src/lib/server/storage/file-store';
import { openStore } from '../../src/lib/server/storage/open-store';
import { createS3Store, S3_LIMITS, type S3Place } from '../../src/lib/server/storage/s3-store';
import { readStoreUrl } from '../../src/lib/server/storage/store-url';
import { FAKE_CREDENTIALS, startFakeS3, type FakeS3 } from '../support/fake-s3';

const text = (content: string) => new TextEncoder().encode(content);

let folder: string;
let s3: FakeS3;
const opened: FileStore[] = [];
const environment = { ...process.env };

beforeAll(async () => {
	folder = mkdtempSync(join(tmpdir(), 'merestone-storage-'));
	s3 = await startFakeS3();
	Object.assign(process.env, FAKE_CREDENTIALS);
});
afterEach(async () => {
	for (const store of opened.splice(0)) await store.close();
});
afterAll(async () => {
	process.env = environment;
	await s3.close();
	rmSync(folder, { recursive: true, force: true });
});

async function open(url: string): Promise<FileStore> {
	const store = await openStore(url);
	opened.push(store);
	return store;
}

const keysOf = async (store: FileStore) => {
	const keys: string[] = [];
	for await (const key of store.keys()) keys.push(key);
	return keys.sort();
};

describe.each([
	['a folder', () => `file:${join(folder, 'contract')}`],
	['an S3-compatible service', () => s3.url]
])('%s', (_, url) => {
	it('keeps bytes under a generated key, gives them back, and lets them go', async () => {
		const store = await open(url());
		const key = newId();
		const bytes = Uint8Array.from({ length: 70_000 }, (_unused, i) => i % 256);
		expect(await store.get(key)).toBeNull();
		await store.put(key, bytes, 'application/pdf');
		expect(await store.get(key)).toEqual(bytes);
		expect(await keysOf(store)).toEqual([key]);
		await store.delete(key);
		await store.delete(key);
		expect(await store.get(key)).toBeNull();
		expect(await keysOf(store)).toEqual([]);
	});

	it('lists every key, also those of a second page, and nothing that is not one', async () => {
		const store = await open(url());
		const keys = Array.from({ length: 5 }, () => newId());
		await Promise.all(keys.map((key) => store.put(key, text(key), 'text/plain')));
		s3.objects.set('kept/readme.txt', { bytes: Buffer.from('x'), type: 'text/plain' });
		expect(await keysOf(store)).toEqual([...keys].sort());
		await Promise.all(keys.map((key) => store.delete(key)));
	});

	it.each(['../../etc/passwd', '', 'x', '01890a5d-ac96-774b-bcce-b302099a8057/..', 'tmp'])(
		'refuses the key %j',
		async (key) => {
			const store = await open(url());
			await expect(store.put(key, text('x'), 'text/plain')).rejects.toThrow(StorageError);
			await expect(store.get(key)).rejects.toThrow(StorageError);
			await expect(store.delete(key)).rejects.toThrow(StorageError);
		}
	);
});

it('a key says when it was made', () => {
	// RFC 9562, appendix A.6: its example of version 7 is of 2022-02-22 14:22:22 GMT-05:00.
	expect(timeOfKey('017f22e2-79b0-7cc3-98c4-dc0c0c07398f').toISOString()).toBe(
		'2022-02-22T19:22:22.000Z'
	);
});

describe('a folder', () => {
	it('shows a file only when it is whole, and leaves nothing behind when it fails', async () => {
		const place = join(folder, 'whole');
		const store = await createDiskStore(place);
		const key = newId();
		// A file where a folder has to be.
		writeFileSync(join(place, key.slice(-2)), 'in the way');
		await expect(store.put(key, text('x'), 'text/plain')).rejects.toThrow(StorageError);
		expect(readdirSync(join(place, 'tmp'))).toEqual([]);
		rmSync(join(place, key.slice(-2)));
		await store.put(key, text('whole'), 'text/plain');
		const path = join(place, key.slice(-2), key.slice(-4, -2), key);
		expect(readFileSync(path, 'utf8')).toBe('whole');
		expect(readdirSync(join(place, 'tmp'))).toEqual([]);
	});

	it('that can’t be made stops the start', async () => {
		writeFileSync(join(folder, 'taken'), '');
		await expect(openStore(`file:${join(folder, 'taken', 'files')}`)).rejects.toThrow();
		expect(existsSync(join(folder, 'taken', 'files'))).toBe(false);
	});
});

describe('an S3-compatible service', () => {
	const short = { ...S3_LIMITS, answerMs: 200, wholeMs: 2_000 };
	const client = (limits: Partial<typeof short> = {}) => {
		const store = createS3Store(readStoreUrl(s3.url) as S3Place, { ...short, ...limits });
		opened.push(store);
		return store;
	};
	const causeOf = async (work: Promise<unknown>): Promise<unknown> => {
		const error: unknown = await work.catch((thrown: unknown) => thrown);
		expect(error).toBeInstanceOf(StorageError);
		return error instanceof Error ? error.cause : null;
	};

	it('gets no checksum headers that services other than Amazon’s refuse', async () => {
		await client().put(newId(), text('x'), 'text/csv');
		const names = Object.keys(s3.lastHeaders());
		expect(names.filter((name) => /checksum|trailer|content-encoding/.test(name))).toEqual([]);
		expect(s3.lastHeaders()['content-type']).toBe('text/csv');
	});

	it('is asked again after an error that may pass', async () => {
		const key = newId();
		s3.fail('internal-error', 'slow-down');
		const before = s3.requests.length;
		await client().put(key, text('kept after all'), 'text/plain');
		expect(s3.requests.length - before).toBe(3);
		s3.fail('stall');
		expect(await client().get(key)).toEqual(text('kept after all'));
	});

	it('is given up after three tries', async () => {
		s3.fail('internal-error', 'internal-error', 'internal-error');
		const before = s3.requests.length;
		expect(await causeOf(client().get(newId()))).toMatchObject({ name: 'InternalError' });
		expect(s3.requests.length - before).toBe(3);
	});

	it('that denies access is not asked again', async () => {
		s3.fail('access-denied');
		const before = s3.requests.length;
		expect(await causeOf(client().put(newId(), text('x'), 'text/plain'))).toMatchObject({
			name: 'AccessDenied'
		});
		expect(s3.requests.length - before).toBe(1);
	});

	it('that never answers, or never ends its answer, is waited for only so long', async () => {
		s3.fail('stall', 'stall', 'stall');
		expect(await causeOf(client().get(newId()))).toMatchObject({ name: 'TimeoutError' });
		s3.fail('stall-body');
		const start = Date.now();
		await causeOf(client({ wholeMs: 500 }).get(newId()));
		expect(Date.now() - start).toBeLessThan(5_000);
	});

	it('refuses another secret', async () => {
		process.env.AWS_SECRET_ACCESS_KEY = 'another';
		expect(await causeOf(client().get(newId()))).toMatchObject({ name: 'SignatureDoesNotMatch' });
		Object.assign(process.env, FAKE_CREDENTIALS);
	});
});

describe('FILES_URL', () => {
	it('reads a folder or a bucket', () => {
		expect(readStoreUrl('file:data/files')).toEqual({ kind: 'disk', folder: 'data/files' });
		expect(readStoreUrl('s3://evidence?region=eu-central-1')).toEqual({
			kind: 's3',
			bucket: 'evidence',
			prefix: '',
			region: 'eu-central-1',
			endpoint: null,
			pathStyle: false
		});
		expect(readStoreUrl('s3://evidence/a/b/?endpoint=https://s.example&pathStyle=1')).toMatchObject(
			{
				prefix: 'a/b/',
				endpoint: 'https://s.example',
				pathStyle: true
			}
		);
	});

	it.each([
		['', 'a folder'],
		['file:', 'a folder'],
		['https://evidence', 'a folder'],
		['s3://evidence', 'a region'],
		['s3://Evidence_1?region=x', 'name of a bucket'],
		['s3://key:secret@evidence?region=x', 'no credentials'],
		['s3://evidence?region=x&acl=public', 'only region, endpoint, pathStyle'],
		['s3://evidence?endpoint=ftp://s.example', 'an endpoint'],
		['s3://evidence/a b?region=x', 'a prefix']
	])('refuses %j', (url, expected) => {
		expect(() => readStoreUrl(url)).toThrow(expected);
	});
});
