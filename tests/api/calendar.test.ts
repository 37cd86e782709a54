import { eq } from 'drizzle-orm';
import ICAL from 'ical.js';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { dayOf } from '../../src/lib/ledger/tasks';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, calendarFeeds, memberships } from '../../src/lib/server/db/schema';
import { hashToken } from '../../src/lib/server/ids';
import { createFeed } from '../../src/lib/server/services/calendar/create-feed';
import { listFeeds } from '../../src/lib/server/services/calendar/list-feeds';
import { readFeed } from '../../src/lib/server/services/calendar/read-feed';
import { revokeFeed } from '../../src/lib/server/services/calendar/revoke-feed';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { groupOfFour, type GroupOfFour } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

const inDays = (days: number) => dayOf(new Date(Date.now() + days * 86_400_000));
const tokenOf = (address: string | null) =>
	/\/calendar\/([\w-]{43})\.ics$/.exec(address ?? '')?.[1] ?? '';

/** What ical.js, a parser of its own, finds in the text. */
function eventsOf(text: string) {
	const calendar = new ICAL.Component(ICAL.parse(text) as unknown[]);
	return calendar.getAllSubcomponents('vevent').map((each) => new ICAL.Event(each));
}

describe('a calendar address', () => {
	let world: TaskWorld;
	beforeEach(async () => {
		world = await openTaskWorld();
	});
	afterEach(() => world.end());

	const eventsAt = async (address: string | null) =>
		eventsOf(await readFeed(world.anonymous, tokenOf(address)));
	const missing = { code: 'not-found' };
	const taskFor = async (ctx: GroupContext | null, dueOn: string) =>
		world.openTask(await world.openClaim(), { assigneeId: ctx?.actor.id ?? '', dueOn });

	it('shows the due dates of one’s own active tasks, of every group one is in', async () => {
		const { member } = world.as;
		const first = await taskFor(member, inDays(9));
		await taskFor(member, '');
		await taskFor(world.wren, inDays(4));
		const { address, groupSlug } = await createFeed(member);
		expect(groupSlug).toBeNull();
		const [event, ...others] = await eventsAt(address);
		expect(others).toEqual([]);
		expect(event?.startDate.toString()).toBe(inDays(9));
		expect(event?.summary).toBe(`Task ${first} due: Recompute elsewhere`);
		expect(event?.description).toContain('= 0.7071');
		expect(event?.sequence).toBe(1);
	});

	it('of a group shows all its tasks, also those open to all', async () => {
		await taskFor(world.as.member, inDays(9));
		await taskFor(null, inDays(2));
		const { address, groupName } = await createFeed(world.as.observer, { groupSlug: 'first' });
		expect(groupName).toBe('First group');
		const events = await eventsAt(address);
		expect(events.map((event) => event.startDate.toString())).toEqual([inDays(2), inDays(9)]);
		expect(events[0]?.description).toContain('Open to all');
		expect(events[1]?.description).toContain('Assigned, Mo Member');
	});

	it('follows a moved date with the same UID and a higher SEQUENCE', async () => {
		const number = await taskFor(world.as.member, inDays(9));
		const { address } = await createFeed(world.as.member);
		const [before] = await eventsAt(address);
		const asks = { assigneeId: world.as.member.actor.id, dueOn: inDays(12), version: 1 };
		await editTask(world.as.maintainer, number, { kind: 'recompute', instructions: '', ...asks });
		const [after] = await eventsAt(address);
		expect(after?.uid).toBe(before?.uid);
		expect(after?.startDate.toString()).toBe(inDays(12));
		expect(after?.sequence).toBeGreaterThan(before?.sequence ?? 0);
	});

	it('drops a task that is accepted or cancelled', async () => {
		const { member, maintainer } = world.as;
		const done = await taskFor(member, inDays(3));
		const off = await taskFor(member, inDays(4));
		const { address } = await createFeed(member);
		await submitTask(member, done, foundValue('0.7071'), []);
		expect(await eventsAt(address)).toHaveLength(2);
		await acceptSubmission(maintainer, done);
		await cancelTask(maintainer, off, 'No longer of interest.');
		expect(await eventsAt(address)).toEqual([]);
	});

	it('gives the same text until something changes', async () => {
		await taskFor(world.as.member, inDays(9));
		const token = tokenOf((await createFeed(world.as.member)).address);
		const text = await readFeed(world.anonymous, token);
		expect(await readFeed(world.anonymous, token)).toBe(text);
		await taskFor(world.as.member, inDays(10));
		expect(await readFeed(world.anonymous, token)).not.toBe(text);
	});

	it('is one for each person and group, however often it is asked for', async () => {
		const { member } = world.as;
		const made = await Promise.all([createFeed(member), createFeed(member), createFeed(member)]);
		expect(new Set(made.map(({ address }) => address)).size).toBe(1);
		const ofGroup = await createFeed(member, { groupSlug: 'first' });
		const ofOther = await createFeed(world.wren, { groupSlug: 'first' });
		expect(ofGroup.address).not.toBe(made[0]?.address);
		expect(ofGroup.address).not.toBe(ofOther.address);
		expect(await listFeeds(member)).toEqual([made[0], ofGroup]);
		expect(await listFeeds(member, { groupSlug: null })).toEqual([made[0]]);
		expect(await listFeeds(member, { groupSlug: 'first' })).toEqual([ofGroup]);
	});

	it('is kept as a hash only, and its making and end are recorded without it', async () => {
		const { member } = world.as;
		const { id, address } = await createFeed(member);
		await revokeFeed(member, id);
		const rows = await world.db.read.select().from(calendarFeeds);
		const trail = await world.db.read.select().from(audit).where(eq(audit.entityId, id));
		expect(trail.map(({ action }) => action)).toEqual(['calendar.created', 'calendar.revoked']);
		expect(trail.every(({ groupId }) => groupId === null)).toBe(true);
		expect(tokenOf(address)).toHaveLength(43);
		expect(JSON.stringify([rows, trail])).not.toContain(tokenOf(address));
	});

	it('that was revoked is answered like one that never was, and a new one is another', async () => {
		const { member } = world.as;
		const { id, address } = await createFeed(member);
		await expect(revokeFeed(world.wren, id)).rejects.toMatchObject(missing);
		await revokeFeed(member, id);
		const refused = expect.objectContaining({
			...missing,
			message: 'There is no calendar at this address.'
		}) as unknown;
		await expect(eventsAt(address)).rejects.toEqual(refused);
		await expect(readFeed(world.anonymous, 'x'.repeat(43))).rejects.toEqual(refused);
		await expect(revokeFeed(member, id)).rejects.toMatchObject(missing);
		expect(await listFeeds(member)).toEqual([]);
		expect((await createFeed(member)).address).not.toBe(address);
	});

	it('shows nothing of a group its maker has left or never was in', async () => {
		const { member } = world.as;
		await taskFor(member, inDays(9));
		const own = await createFeed(member);
		const ofGroup = await createFeed(member, { groupSlug: 'first' });
		await expect(createFeed(world.outsider, { groupSlug: 'first' })).rejects.toMatchObject(missing);
		expect(await eventsAt(own.address)).toHaveLength(1);
		await world.db.write((tx) =>
			tx.delete(memberships).where(eq(memberships.userId, member.actor.id))
		);
		await expect(eventsAt(ofGroup.address)).rejects.toMatchObject(missing);
		expect(await eventsAt(own.address)).toEqual([]);
		expect(await listFeeds(member)).toEqual([own]);
	});

	it('made under another secret of the server still works but is not shown', async () => {
		const { member } = world.as;
		await taskFor(member, inDays(9));
		const { id } = await createFeed(member);
		const earlier = 'a token that another secret gave';
		await world.db.write((tx) =>
			tx
				.update(calendarFeeds)
				.set({ tokenHash: hashToken(earlier) })
				.where(eq(calendarFeeds.id, id))
		);
		expect(eventsOf(await readFeed(world.anonymous, earlier))).toHaveLength(1);
		expect(await listFeeds(member)).toMatchObject([{ id, address: null }]);
	});
});

describe('over HTTP', () => {
	let server: TestServer;
	let group: GroupOfFour;
	beforeAll(async () => {
		server = await startServer();
		group = await groupOfFour(server, 'Quarry Row');
	});
	afterAll(() => server.stop());

	async function addressOn(path: string): Promise<string> {
		const page = await (await group.member.get(path)).text();
		const found = /http:\/\/[^\s<"]+\/calendar\/[\w-]+\.ics/.exec(page)?.[0];
		return found ? new URL(found).pathname : '';
	}

	it('is made on a page, read without signing in, and revoked', async () => {
		const tasks = `/g/${group.slug}/tasks`;
		expect(await addressOn(tasks)).toBe('');
		const made = await group.member.submit('/home/tasks?/makeCalendar', {
			group: group.slug,
			back: tasks
		});
		expect(made.status).toBe(303);
		expect(made.headers.get('location')).toBe(tasks);
		const address = await addressOn(tasks);
		expect(await addressOn('/account')).toBe(address);
		expect(await addressOn('/home/tasks')).toBe('');

		const first = await group.anonymous.get(address);
		expect(first.status).toBe(200);
		expect(first.headers.get('content-type')).toBe('text/calendar; charset=utf-8');
		expect(first.headers.get('cache-control')).toBe('private, no-store');
		const text = await first.text();
		expect(text).toMatch(/^BEGIN:VCALENDAR\r\n/);
		expect(eventsOf(text)).toEqual([]);
		const etag = first.headers.get('etag') ?? '';
		const again = await group.anonymous.get(address, { 'If-None-Match': etag });
		expect(again.status).toBe(304);
		expect(await again.text()).toBe('');

		const id = /name="id" value="([^"]+)"/.exec(await (await group.member.get(tasks)).text())?.[1];
		const revoked = await group.member.submit('/home/tasks?/revokeCalendar', {
			id: id ?? '',
			back: '//elsewhere.example'
		});
		expect(revoked.headers.get('location')).toBe('/home/tasks');
		const gone = await group.anonymous.get(address);
		expect(gone.status).toBe(404);
		expect(gone.headers.get('content-type')).toContain('application/problem+json');
		expect(await gone.text()).not.toContain(group.slug);
		expect(server.logs()).not.toContain(/calendar\/([\w-]+)\.ics/.exec(address)?.[1] ?? 'none');
	});

	it('is answered to a request for its head too, and to no other method', async () => {
		await group.member.submit('/home/tasks?/makeCalendar');
		const address = await addressOn('/home/tasks');
		expect((await group.anonymous.request(address, { method: 'HEAD' })).status).toBe(200);
		expect((await group.member.submit(address)).status).toBe(405);
	});
});
