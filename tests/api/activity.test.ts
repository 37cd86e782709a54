import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { activityCsv } from '../../src/lib/features/activity/activity-csv';
import { parseActivityQuery } from '../../src/lib/schemas/activity-query';
import type { GroupContext } from '../../src/lib/server/context';
import { claimActivity } from '../../src/lib/server/services/activity/claim-activity';
import { listActivity } from '../../src/lib/server/services/activity/list-activity';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { addComment } from '../../src/lib/server/services/comments/add-comment';
import { removeComment } from '../../src/lib/server/services/comments/remove-comment';
import { changeRole } from '../../src/lib/server/services/groups/change-role';
import { findTask } from '../../src/lib/server/services/tasks/find-task';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
const at =
	(day: number) =>
	(ctx: GroupContext): GroupContext => ({
		...ctx,
		requestId: `request-${day}`,
		now: () => new Date(Date.UTC(2004, 10, day, 9))
	});

/** A week of a reading group, a day each. */
beforeAll(async () => {
	world = await openServiceWorld();
	const { owner, maintainer, member, observer } = world.as;
	const { number } = await enterClaim(at(1)(member), claimFields({ printed: '2.83' }));
	await enterClaim(
		at(2)(member),
		claimFields({ quantity: 'local', printed: '2', bibtex: bibtexOf(2) })
	);
	await editClaim(at(3)(member), number, 1, claimFields());
	const assigneeId = member.actor.id;
	await openTasks(at(4)(maintainer), { claims: [number], assigneeId });
	await submitTask(at(5)(member), 1, {
		kind: 'value',
		printed: '2.8284',
		program: 'a script',
		programVersion: '2.1'
	});
	const task = await findTask(world.db.read, member, 1);
	const said = { subject: 'task', subjectId: task.id } as const;
	const { id } = await addComment(at(6)(member), {
		...said,
		body: '=HYPERLINK("x") a slip of mine'
	});
	await removeComment(at(7)(maintainer), id);
	await changeRole(at(8)(owner), { userId: observer.actor.id, role: 'member' });
	await world.recompute();
	await publishClaim(at(9)(maintainer), number);
});
afterAll(() => world.close());

const list = (query = '', ctx: GroupContext = world.as.observer) =>
	listActivity(ctx, parseActivityQuery(new URLSearchParams(query)));
const texts = async (query = '') =>
	(await list(query)).entries.map(({ who, text }) => (who ? `${who} ${text}` : text));

describe('the activity of a group', () => {
	it('is readable, newest first', async () => {
		// The product judges by the machine's own clock, after these days.
		const people = (await list()).entries.filter(({ who }) => who !== null);
		expect(people.map(({ who, text }) => `${who} ${text}`)).toEqual([
			'Mae Maintainer published claim 1',
			'Olin Owner changed Obi Observer from an observer to a member',
			'Mae Maintainer removed a comment on task 1 on claim 1',
			'Mo Member commented on task 1 on claim 1',
			'Mo Member submitted a value for task 1 on claim 1',
			'Mae Maintainer opened task 1 on claim 1 for Mo Member',
			'Mo Member changed the value of claim 1 from 2.83 to 2.8284',
			'Mo Member entered claim 2',
			'Mo Member entered claim 1'
		]);
		expect(await texts()).toContain('The verdict on claim 1 went from Open to Agreement');
	});

	it('leads to what it is about', async () => {
		const { entries } = await list();
		const href = (text: string) => entries.find((entry) => entry.text === text)?.href;
		const task = '/g/first/tasks/1';
		expect(href('entered claim 2')).toBe('/g/first/claims/2');
		expect(href('submitted a value for task 1 on claim 1')).toBe(task);
		expect(href('commented on task 1 on claim 1')).toMatch(/^\/g\/first\/tasks\/1#comment-[\w-]+$/);
		expect(href('changed Obi Observer from an observer to a member')).toBe('/g/first/members');
	});

	it.each([
		['kind=talk', ['Mae Maintainer removed a comment', 'Mo Member commented']],
		['kind=people', ['Olin Owner changed Obi']],
		['kind=tasks', ['Mo Member submitted a value', 'Mae Maintainer opened task 1']],
		['claim=2&kind=claims&to=2004-11-30', ['Mo Member entered claim 2']],
		['from=2004-11-03&to=2004-11-04', ['Mae Maintainer opened', 'Mo Member changed the value']],
		['claim=77', []]
	] as const)('is narrowed by %s', async (query, starts) => {
		const found = await texts(query);
		expect(found).toHaveLength(starts.length);
		starts.forEach((start, i) => expect(found[i]).toContain(start));
	});

	it('is narrowed to a person, and names everybody who did something', async () => {
		const { people } = await list();
		expect(people.map(({ name }) => name)).toEqual(['Mae Maintainer', 'Mo Member', 'Olin Owner']);
		const { id } = world.as.owner.actor;
		expect(await texts(`person=${id}`)).toHaveLength(1);
	});

	it('shows what changed and in which request to maintainers only', async () => {
		const edited = async (ctx: GroupContext) =>
			(await list('from=2004-11-03&to=2004-11-03', ctx)).entries[0];
		expect(await edited(world.as.maintainer)).toMatchObject({
			changes: [{ field: 'Value', before: '2.83', after: '2.8284' }],
			requestId: 'request-3'
		});
		for (const ctx of [world.as.member, world.as.observer]) {
			expect(await edited(ctx)).toMatchObject({ changes: [], requestId: '' });
		}
		// A removed text is nobody's to read but theirs who may have removed it.
		expect(JSON.stringify(await list('', world.as.member))).not.toContain('a slip of mine');
		expect(JSON.stringify(await list('', world.as.maintainer))).toContain('a slip of mine');
	});

	it('is that group’s alone', async () => {
		expect((await list('', world.outsider)).entries).toEqual([]);
		const claim = await findClaim(world.db.read, world.as.member, 1);
		expect((await list(`claim=${claim.number}`, world.outsider)).total).toBe(0);
	});

	it('comes in pages that do not overlap', async () => {
		const first = await list();
		expect(first).toMatchObject({ page: 1, pageSize: 50, total: first.entries.length });
		// Past the last page is the last page.
		expect(await list('page=9')).toEqual(first);
	});

	it('is a file that a spreadsheet opens without running anything', async () => {
		const { entries } = await list('', world.as.maintainer);
		const csv = activityCsv(entries, 'https://merestone.example');
		expect(csv.split('\r\n')[0]).toBe('time,who,what,kind,address,changes,request');
		expect(csv.split('\r\n').length).toBeGreaterThan(entries.length);
		expect(csv).toContain('https://merestone.example/g/first/claims/2');
		const cells = activityCsv(
			entries.slice(0, 1).map((entry) => ({ ...entry, who: '=1+1', text: '@SUM(A1)' })),
			''
		);
		expect(cells).toContain("'=1+1,'@SUM(A1)");
	});
});

describe('the activity of a claim', () => {
	it('has its tasks and the talk on them too, by kind', async () => {
		const { entries, kinds, more } = await claimActivity(world.as.observer, 1);
		expect(kinds).toEqual(['claims', 'tasks', 'talk']);
		expect(more).toBe(0);
		expect(entries.map(({ text }) => text)).toContain('submitted a value for task 1 on claim 1');
		const talk = await claimActivity(world.as.observer, 1, 'talk');
		expect(talk.entries).toHaveLength(2);
		await expect(claimActivity(world.outsider, 1)).rejects.toMatchObject({ code: 'not-found' });
	});

	it('is not what everybody sees of a published claim: no names, no tasks, no talk', async () => {
		const { id } = await findClaim(world.db.read, world.as.member, 1);
		const { history } = await showPublicClaim(world.anonymous, id);
		expect(history.length).toBeGreaterThan(2);
		expect(history.every(({ who }) => who === null)).toBe(true);
		const said = JSON.stringify(history);
		expect(said).not.toMatch(/Mae|Mo M|Olin|task|comment|submitted/i);
	});
});
