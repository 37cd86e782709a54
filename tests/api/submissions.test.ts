import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { parseTaskQuery } from '../../src/lib/schemas/task-input';
import { evidenceFiles, submissions } from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { listTasks } from '../../src/lib/server/services/tasks/list-tasks';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import { foundValue, issueAt, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const conflict = { code: 'conflict' };
const text = (name: string, content: string) => ({
	name,
	bytes: new TextEncoder().encode(content)
});

describe('a submission', () => {
	const submitting = async (input: object, over = {}) => {
		const number = await world.openTask(await world.openClaim(), over);
		return submitTask(world.wren, number, input);
	};

	it.each<[string, object, string, RegExp]>([
		['no value', foundValue(''), 'printed', /Give the value you found/],
		['a value that is none', foundValue('about half'), 'printed', /can't be read/],
		['a sign against the relation', foundValue('< 3', { relation: '>=' }), 'printed', /keep one/],
		['no method', foundValue('0.7', { program: '' }), 'program', /how the value was found/],
		['no version', foundValue('0.7', { programVersion: '' }), 'programVersion', /version/],
		['no words', { kind: 'statement' }, 'comment', /Say what you found/],
		['no certificate', { kind: 'certificate' }, 'certificate', /Paste/],
		['of another kind', { kind: 'transcription' }, 'kind', /recompute elsewhere/]
	])('is refused at its field: %s', async (_, input, field, message) => {
		await expect(submitting(input)).rejects.toMatchObject(issueAt(field, message));
		const [task] = (await listTasks(world.wren, parseTaskQuery(new URLSearchParams()))).rows;
		expect(task).toMatchObject({ state: 'open', version: 1 });
	});

	it('names the place in a value that can’t be read', async () => {
		await expect(submitting(foundValue('2*x'))).rejects.toMatchObject({
			issues: [{ field: 'printed', position: 2 }]
		});
	});

	it('may be a method without a program, words, or a file alone', async () => {
		await submitting(foundValue('0.7', { program: '', programVersion: '', method: 'by hand' }));
		await submitting({ kind: 'statement', comment: 'They answered.' }, { kind: 'ask-authors' });
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.wren, number, { kind: 'statement' }, [text('log.txt', 'ran')]);
		expect((await showTask(world.wren, number)).submissions[0]?.files).toMatchObject([
			{ name: 'log.txt', bytes: 3 }
		]);
	});

	it('keeps its files, and nothing when anything of it is refused', async () => {
		const number = await world.openTask(await world.openClaim());
		const files = [text('run.log', 'eigenvalues 1 2 3'), text('matrix.csv', '1,2\n3,4')];
		await submitTask(world.wren, number, foundValue('0.70711'), files);
		const [submission] = (await showTask(world.as.observer, number)).submissions;
		expect(submission?.files.map(({ name }) => name)).toEqual(['run.log', 'matrix.csv']);
		const second = await world.openTask(await world.openClaim());
		const bad = { name: 'tool.exe', bytes: new Uint8Array([0x4d, 0x5a, 0, 0]) };
		await expect(
			submitTask(world.wren, second, foundValue('0.7'), [text('run.log', 'ok'), bad])
		).rejects.toMatchObject(issueAt('files', /tool\.exe/));
		expect((await showTask(world.wren, second)).submissions).toEqual([]);
		expect(await world.db.read.$count(evidenceFiles)).toBe(2);
	});

	it('comparing with the paper confirms the claim, and returning it takes that back', async () => {
		const claim = await world.openClaim();
		const number = await world.openTask(claim, { kind: 'confirm-transcription' });
		await expect(takeTask(world.as.member, number)).rejects.toMatchObject(conflict);
		expect((await showTask(world.as.member, number)).may).toMatchObject({
			take: false,
			submit: false
		});
		const yes = { valueMatches: 'yes', locatorMatches: 'yes', inequalityMatches: 'yes' } as const;
		const kind = 'transcription' as const;
		await expect(
			submitTask(world.wren, number, { kind, ...yes, valueMatches: '' })
		).rejects.toMatchObject(issueAt('valueMatches', /./));
		await expect(
			submitTask(world.wren, number, { kind, ...yes, valueMatches: 'no' })
		).rejects.toMatchObject(issueAt('comment', /what is wrong/));
		await submitTask(world.wren, number, { kind, ...yes });
		expect(await showTask(world.wren, number)).toMatchObject({
			state: 'submitted',
			submissions: [{ kind, transcription: { current: true, valueMatches: true } }]
		});
		await returnSubmission(world.as.maintainer, number, 'Wrong page.');
		await submitTask(world.wren, number, {
			kind,
			...yes,
			valueMatches: 'no',
			comment: 'It is 0.71'
		});
		const { submissions: tries } = await showTask(world.wren, number);
		expect(
			tries.map(({ transcription }) => [transcription?.current, transcription?.valueMatches])
		).toEqual([
			[false, true],
			[true, false]
		]);
		await acceptSubmission(world.as.maintainer, number);
	});

	it('is not accepted when the claim is about something else since', async () => {
		const claim = await world.openClaim();
		const number = await world.openTask(claim);
		await submitTask(world.wren, number, foundValue('0.70711'));
		const { input } = await showClaim(world.as.member, claim);
		await editClaim(world.as.member, claim, 1, { ...input, described: 'three qubits' });
		expect((await showTask(world.wren, number)).submissions[0]?.current).toBe(false);
		await expect(acceptSubmission(world.as.maintainer, number)).rejects.toMatchObject(conflict);
		const [kept] = await world.db.read.select().from(submissions);
		expect(kept?.state).toBe('waiting');
	});
});

describe('a submission for a claim that was edited since its form was opened', () => {
	const edited = async (kind: 'recompute' | 'confirm-transcription') => {
		const claim = await world.openClaim();
		const number = await world.openTask(claim, { kind });
		const { input } = await showClaim(world.as.member, claim);
		await editClaim(world.as.member, claim, 1, { ...input, printed: '0.7072', locator: 'eq. (8)' });
		return { claim, number, input };
	};

	it('is refused with what was changed, and nothing of it is kept', async () => {
		const { claim, number } = await edited('recompute');
		const found = foundValue('0.70711', { claimVersion: 1 });
		await expect(
			submitTask(world.wren, number, found, [text('log.txt', 'ran')])
		).rejects.toMatchObject({
			...conflict,
			message: `Claim ${claim} was edited since you opened this form: value 0.7071 is now 0.7072; locator eq. (7) is now eq. (8). Your text is kept; look at the claim as it is now, and submit again what still holds.`
		});
		expect(await world.db.read.select().from(submissions)).toEqual([]);
		expect(await world.db.read.select().from(evidenceFiles)).toEqual([]);
		await submitTask(world.wren, number, { ...found, claimVersion: 2 });
		expect((await showTask(world.wren, number)).state).toBe('submitted');
	});

	it('names changes over several edits once, from the version that was seen', async () => {
		const { claim, number, input } = await edited('recompute');
		await editClaim(world.as.member, claim, 2, { ...input, printed: '0.7071', note: 'as printed' });
		await expect(
			submitTask(world.wren, number, foundValue('0.7', { claimVersion: 1 }))
		).rejects.toMatchObject({ message: expect.stringContaining('form: note. Your') });
		await expect(
			submitTask(world.wren, number, foundValue('0.7', { claimVersion: 2 }))
		).rejects.toMatchObject({
			message: expect.stringContaining('value 0.7072 is now 0.7071; locator eq. (8) is now eq. (7)')
		});
	});

	it('is refused for a comparison with the paper, too', async () => {
		const { claim, number } = await edited('confirm-transcription');
		const compared = {
			kind: 'transcription',
			valueMatches: 'yes',
			locatorMatches: 'yes',
			inequalityMatches: 'yes'
		} as const;
		await expect(
			submitTask(world.wren, number, { ...compared, claimVersion: 1 })
		).rejects.toMatchObject(conflict);
		expect((await showClaim(world.as.member, claim)).confirmed).toBe(false);
		await submitTask(world.wren, number, { ...compared, claimVersion: 2 });
		expect((await showTask(world.wren, number)).state).toBe('submitted');
	});
});
