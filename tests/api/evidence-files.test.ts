import { createHash } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { TASK_LIMITS } from '../../src/lib/schemas/task-input';
import { submittedWords } from '../../src/lib/server/http/submit-action';
import { evidenceFiles, submissions } from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import type { UploadedFile } from '../../src/lib/server/services/evidence-files/check-file';
import { downloadFile } from '../../src/lib/server/services/evidence-files/download-file';
import { storeFiles } from '../../src/lib/server/services/evidence-files/keep-files';
import {
	MOST_ORPHANS,
	sweepOrphans
} from '../../src/lib/server/services/evidence-files/sweep-orphans';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import { StorageError, type FileStore } from '../../src/lib/server/storage/file-store';
import { fileStore, setFileStore } from '../../src/lib/server/storage/open-store';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
let task: number;
const environment = { ...process.env };

beforeEach(async () => {
	// Storing logs what fails, and the log belongs to the configuration.
	Object.assign(process.env, { MERESTONE_DEMO: '1', MERESTONE_LOG: 'silent' });
	world = await openServiceWorld();
	const { member, maintainer } = world.as;
	const { number } = await enterClaim(member, claimFields());
	const { numbers } = await openTasks(maintainer, {
		claims: [number],
		kind: 'recompute',
		assigneeId: '',
		dueOn: '',
		instructions: ''
	});
	task = numbers[0] ?? 0;
	await takeTask(member, task);
});
afterEach(() => {
	world.close();
	process.env = { ...environment };
});

const file = (name: string, content: string | Uint8Array = 'x = 1\n'): UploadedFile => ({
	name,
	bytes: typeof content === 'string' ? new TextEncoder().encode(content) : content
});

const submit = (files: readonly UploadedFile[]) =>
	submitTask(world.as.member, task, { kind: 'statement', comment: 'See the files.' }, files);

const rows = () => world.db.read.select().from(evidenceFiles);

async function stored(): Promise<string[]> {
	const keys: string[] = [];
	for await (const key of (await fileStore()).keys()) keys.push(key);
	return keys.sort();
}

async function refusal(work: Promise<unknown>) {
	const error: unknown = await work.catch((thrown: unknown) => thrown);
	expect(await rows()).toEqual([]);
	expect(await stored()).toEqual([]);
	return error;
}

describe('files handed in', () => {
	it('are kept under generated keys and come back as they were, for the group alone', async () => {
		const script = 'print("0.25")\n';
		await submit([file('../../run.py', script), file('Überblick.csv', 'a,b\n1,2\n')]);
		const kept = await rows();
		expect(kept.map(({ name }) => name)).toEqual(['run.py', 'Überblick.csv']);
		expect(await stored()).toEqual(kept.map(({ id }) => id).sort());
		const [first] = kept;
		expect(first).toMatchObject({
			groupId: world.as.member.group.id,
			uploadedBy: world.as.member.actor.id,
			bytes: script.length,
			mediaType: 'text/plain; charset=utf-8',
			sha256: createHash('sha256').update(script).digest('hex')
		});
		const id = first?.id ?? '';
		const got = await downloadFile(world.as.observer, id);
		expect(new TextDecoder().decode(got.bytes)).toBe(script);
		await expect(downloadFile(world.outsider, id)).rejects.toMatchObject({ code: 'not-found' });
		await expect(downloadFile(world.as.observer, newId())).rejects.toMatchObject({
			code: 'not-found'
		});
	});

	it('say what they were called before', async () => {
		const [one] = await storeFiles(world.as.member, [file('..\\secret\\CON.txt')]);
		expect(one).toMatchObject({ name: '_CON.txt', calledBefore: '..\\secret\\CON.txt' });
		const [same] = await storeFiles(world.as.member, [file('run.py')]);
		expect(same).toMatchObject({ name: 'run.py', calledBefore: null });
	});

	it('that keep another name are told of once they are handed in', async () => {
		const handed = await submit([file('..\\secret\n\\run.py'), file('same.py')]);
		expect(handed.renamed).toEqual([{ from: '..\\secret \\run.py', to: 'run.py' }]);
		expect(submittedWords(handed)).toContain('“..\\secret \\run.py” is kept as “run.py”.');
		expect(submittedWords({ renamed: [] })).not.toContain('kept');
	});

	it('that changed in the storage are not given out', async () => {
		await submit([file('run.py')]);
		const [row] = await rows();
		const store = await fileStore();
		await store.put(row?.id ?? '', new TextEncoder().encode('x = 2\n'), 'text/plain');
		await expect(downloadFile(world.as.member, row?.id ?? '')).rejects.toThrow('damaged');
		await store.delete(row?.id ?? '');
		await expect(downloadFile(world.as.member, row?.id ?? '')).rejects.toThrow('missing');
	});
});

describe('bad files are refused, each by its name, and nothing is kept', () => {
	const big = new Uint8Array(TASK_LIMITS.fileBytes + 1).fill(0x30);

	it.each([
		['too large', [file('digits.txt', big)], 'too-large', '“digits.txt” has 10.1 MB'],
		['the wrong type', [file('page.html', '<p>')], 'invalid', 'ends in .html'],
		['a lying ending', [file('paper.pdf', 'MZ not a paper')], 'invalid', 'its ending says'],
		['a path for a name', [file('../../etc/passwd')], 'invalid', '“passwd” has no ending'],
		['no name at all', [file('..')], 'invalid', 'File 1 has no usable name'],
		['nothing in it', [file('empty.txt', '')], 'invalid', '“empty.txt” is empty'],
		['good ones beside', [file('run.py'), file('run.exe')], 'invalid', '“run.exe”'],
		[
			'one more than five',
			Array.from({ length: 6 }, (_, i) => file(`${i}.txt`)),
			'invalid',
			'These are 6 files; at most 5'
		]
	] as const)('%s', async (_, files, code, message) => {
		const error = await refusal(submit(files));
		expect(error).toMatchObject({ code, message: expect.stringContaining(message) });
		expect(error).toMatchObject({ issues: [{ field: 'files' }] });
		// What was not handed in can still be.
		await submit([file('run.py')]);
		expect(await rows()).toHaveLength(1);
	});

	it('each bad one has its own issue', async () => {
		const error = await refusal(submit([file('a.exe'), file('b.txt'), file('c.txt', '')]));
		expect(error).toMatchObject({
			issues: [
				{ field: 'files', message: expect.stringContaining('“a.exe”') },
				{ field: 'files', message: expect.stringContaining('“c.txt”') }
			]
		});
	});

	it('past what the group may keep', async () => {
		await submit([file('run.py')]);
		const full = TASK_LIMITS.groupBytes - 3;
		await world.db.write((tx) => tx.update(evidenceFiles).set({ bytes: full }));
		const second = await storeFiles(world.as.member, [file('b.txt', 'abc')]);
		expect(second).toHaveLength(1);
		await expect(storeFiles(world.as.member, [file('b.txt', 'abcd')])).rejects.toMatchObject({
			code: 'too-large',
			message: expect.stringContaining('1 GB together, of which 0 MB are left')
		});
		// Another group has its own.
		expect(await storeFiles(world.outsider, [file('b.txt', 'abcd')])).toHaveLength(1);
	});

	it('by somebody who has no part in the task', async () => {
		const { maintainer } = world.as;
		const asks = { kind: 'statement', comment: 'x' } as const;
		const error = await refusal(submitTask(maintainer, task, asks, [file('run.py')]));
		expect(error).toMatchObject({ name: 'ServiceError' });
	});
});

describe('when the storage fails', () => {
	/** Works until its n-th file. */
	async function failingAt(n: number): Promise<void> {
		const real = await fileStore();
		let count = 0;
		const store: FileStore = {
			...real,
			put: (key, bytes, mediaType) => {
				if (++count === n) return Promise.reject(new StorageError('the disk is full'));
				return real.put(key, bytes, mediaType);
			}
		};
		setFileStore(store);
	}

	it('nothing is handed in, and what was stored is taken back', async () => {
		await failingAt(2);
		const error = await refusal(submit([file('a.txt'), file('b.txt')]));
		expect(error).toMatchObject({ code: 'unavailable', retryAfterSeconds: 60 });
		expect(await world.db.read.select().from(submissions)).toEqual([]);
	});
});

describe('the sweep', () => {
	const DAY = 24 * 3_600_000;

	it('deletes what no submission names, once it is a day old', async () => {
		await submit([file('run.py')]);
		const kept = await stored();
		const store = await fileStore();
		await storeFiles(world.as.member, [file('lost.txt')]);
		const soon = new Date(Date.now() + DAY / 2);
		expect(await sweepOrphans(world.db, store, soon)).toEqual({ deleted: 0, refused: false });
		expect(await stored()).toHaveLength(2);
		const later = new Date(Date.now() + DAY + 60_000);
		expect(await sweepOrphans(world.db, store, later)).toEqual({ deleted: 1, refused: false });
		expect(await stored()).toEqual(kept);
	});

	it('deletes nothing when the storage looks like another database’s', async () => {
		const store = await fileStore();
		const old = Date.now() - 2 * DAY;
		for (let i = 0; i <= MOST_ORPHANS; i++) {
			const key = newId().replace(
				/^.{13}/,
				(old + i).toString(16).padStart(12, '0').replace(/^.{8}/, '$&-')
			);
			await store.put(key, new Uint8Array([i]), 'text/plain');
		}
		const swept = await sweepOrphans(world.db, store, new Date());
		expect(swept).toEqual({ deleted: 0, refused: true });
		expect(await stored()).toHaveLength(MOST_ORPHANS + 1);
	});

	it('leaves the files of a submission alone however old they are', async () => {
		await submit([file('run.py')]);
		const [row] = await rows();
		const years = new Date(Date.now() + 1_000 * DAY);
		await sweepOrphans(world.db, await fileStore(), years);
		expect(await stored()).toEqual([row?.id]);
		await world.db.write((tx) =>
			tx.delete(submissions).where(eq(submissions.id, row?.submissionId ?? ''))
		);
		await sweepOrphans(world.db, await fileStore(), years);
		expect(await stored()).toEqual([]);
	});
});
