import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
	atRest,
	CONFIRMED,
	handIn,
	hostileWorld,
	type HostileWorld
} from '../support/hostile-world';
import { joiningLink, newPerson } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { bibtexOf, claimFields } from '../support/service';
import type { Fields, Visitor } from '../support/visitor';
import { tableDigests } from '../support/whole-database';

let server: TestServer;
let world: HostileWorld;
/** Was a maintainer of the group, and keeps the cookie. */
let removed: Visitor;

beforeAll(async () => {
	server = await startServer();
	world = await hostileWorld(server, 'Quince Yard');
	removed = await newPerson(server);
	const link = await joiningLink(world.owner, world.slug, 'maintainer');
	expect((await removed.submit(link)).status).toBe(303);
	const id = await world.id(
		"SELECT user_id FROM memberships WHERE role = 'maintainer' ORDER BY created_at DESC LIMIT 1"
	);
	const out = await world.owner.submit(`/g/${world.slug}/members?/remove`, { user: id });
	expect(out.status).toBe(200);
});
afterAll(() => server.stop());

interface Door {
	/** Below the group's address. */
	readonly path: string;
	readonly fields: Fields;
}

/** Everything of this issue that changes something in a group, with ids that are there. */
function doors({ ids, claim, task }: HostileWorld): readonly Door[] {
	const onTask = (door: string, fields: Fields = {}) => ({
		path: `/tasks/${task}?/${door}`,
		fields
	});
	const onClaim = (door: string, fields: Fields = {}) => ({
		path: `/claims/${claim}?/${door}`,
		fields
	});
	const onMembers = (door: string, fields: Fields) => ({ path: `/members?/${door}`, fields });
	const asks = { claims: String(claim), assigneeId: ids.member, instructions: 'Do it.' };
	return [
		...['take', 'start', 'release', 'accept'].map((door) => onTask(door)),
		...['return', 'cancel'].map((door) => onTask(door, { reason: 'Not so.' })),
		onTask('edit', { version: '3', kind: 'recompute', assigneeId: ids.owner }),
		onTask('submit', { kind: 'statement', comment: 'Nothing found.' }),
		onTask('comment', { body: 'I was here.' }),
		onTask('edit-comment', { id: ids.comment, body: 'I was here.' }),
		onTask('remove-comment', { id: ids.comment }),
		...['recompute', 'withdraw', 'restore', 'propose', 'publish', 'unpublish'].map((door) =>
			onClaim(door)
		),
		onClaim('assign', asks),
		onClaim('confirm', { ...CONFIRMED, version: '1' }),
		onClaim('attachNotice', { kind: 'newer-version', referenceId: ids.reference }),
		onClaim('removeNotice', { id: ids.notice }),
		onClaim('handleMessage', { id: ids.message }),
		onClaim('supersede', { by: '1' }),
		onClaim('comment', { body: 'I was here.' }),
		onClaim('edit-comment', { id: ids.comment, body: 'I was here.' }),
		onClaim('remove-comment', { id: ids.comment }),
		{ path: `/claims/${claim}/edit?/save`, fields: { version: '1', printed: '3' } },
		{ path: '/tasks/new?/open', fields: asks },
		{ path: `/inequalities/${ids.inequality}?/comment`, fields: { body: 'I was here.' } },
		onMembers('mail', { emails: 'more@elsewhere.example', role: 'observer' }),
		onMembers('invite', { role: 'observer' }),
		onMembers('resend', { id: ids.invitation }),
		onMembers('revoke', { id: ids.invitation }),
		onMembers('role', { user: ids.member, role: 'owner' }),
		onMembers('remove', { user: ids.member }),
		onMembers('transfer', { user: ids.member }),
		{ path: '/settings?/save', fields: { name: 'Taken over', slug: 'taken-over' } }
	];
}

const EXCEPT = ['sessions'];
const digests = () => tableDigests(server.databaseUrl, EXCEPT);

describe('from outside a group', () => {
	it.each(['outsider', 'removed'] as const)('every door is shut to the %s', async (who) => {
		const visitor = who === 'removed' ? removed : world.outsider;
		const before = await digests();
		for (const { path, fields } of doors(world)) {
			const response = await visitor.submit(`/g/${world.slug}${path}`, fields);
			expect([path, response.status]).toEqual([path, 404]);
		}
		const file = await handIn(visitor, `/g/${world.slug}/tasks/${world.task}`, {}, [
			['a.txt', 'a']
		]);
		expect(file.status).toBe(404);
		expect(await digests()).toEqual(before);
	});

	it('ids of another group do nothing at doors of one’s own', async () => {
		const { outsider, outsiderSlug, ids } = world;
		// A claim and a task of one's own, so that the doors are there.
		const api = `/api/v1/groups/${outsiderSlug}/claims`;
		const fields = claimFields({ printed: '2.8284', bibtex: bibtexOf(950) });
		expect((await outsider.sendJson('POST', api, fields)).status).toBe(201);
		const opened = await outsider.submit(`/g/${outsiderSlug}/tasks/new?/open`, { claims: '1' });
		expect(opened.status).toBe(303);
		await atRest(server);
		const before = await digests();
		const theirs: readonly (readonly [path: string, fields: Fields])[] = [
			['/tasks/1?/edit', { version: '1', kind: 'recompute', assigneeId: ids.member }],
			['/tasks/1?/edit-comment', { id: ids.comment, body: 'I was here.' }],
			['/tasks/1?/remove-comment', { id: ids.comment }],
			['/tasks/new?/open', { claims: '1', assigneeId: ids.member }],
			['/tasks/new?/open', { claims: world.claimId }],
			['/claims/1?/assign', { assigneeId: ids.owner }],
			['/claims/1?/attachNotice', { kind: 'erratum', referenceId: ids.reference }],
			['/claims/1?/removeNotice', { id: ids.notice }],
			['/claims/1?/handleMessage', { id: ids.message }],
			['/claims/1?/edit-comment', { id: ids.comment, body: 'I was here.' }],
			['/claims/1?/remove-comment', { id: ids.comment }],
			['/members?/resend', { id: ids.invitation }],
			['/members?/revoke', { id: ids.invitation }],
			['/members?/role', { user: ids.member, role: 'observer' }],
			['/members?/remove', { user: ids.member }],
			['/members?/transfer', { user: ids.member }]
		];
		for (const [path, sent] of theirs) {
			const response = await outsider.submit(`/g/${outsiderSlug}${path}`, sent);
			expect([path, [400, 404, 409].includes(response.status)]).toEqual([path, true]);
		}
		for (const path of [
			`/g/${outsiderSlug}/files/${ids.file}`,
			`/g/${outsiderSlug}/submissions/${ids.submission}/certificate`,
			`/g/${world.slug}/files/${ids.file}`,
			`/g/${outsiderSlug}/references/${ids.reference}`
		]) {
			expect([path, (await outsider.get(path)).status]).toEqual([path, 404]);
		}
		const news = await outsider.submit('/news?/open', { id: ids.notification });
		expect(news.status).toBe(404);
		const feed = await outsider.submit('/home/tasks?/revokeCalendar', { id: ids.feed });
		expect(feed.status).toBe(404);
		const calendar = await outsider.submit('/home/tasks?/makeCalendar', { group: world.slug });
		expect(calendar.status).toBe(404);
		expect(await digests()).toEqual(before);
	});

	it('filters find nothing of another group', async () => {
		const { outsider, outsiderSlug, ids } = world;
		for (const path of [
			`/api/v1/groups/${outsiderSlug}/activity?person=${ids.member}`,
			`/api/v1/groups/${outsiderSlug}/tasks?state=all&assignee=${ids.member}`
		]) {
			const answer = (await (await outsider.get(path)).json()) as { items: unknown[] };
			expect([path, answer.items]).toEqual([path, []]);
		}
		expect((await outsider.get(`/api/v1/inequalities?group=${world.slug}`)).status).toBe(404);
	});
});

describe('within a group', () => {
	it('an observer changes nothing', async () => {
		const before = await digests();
		for (const { path, fields } of doors(world)) {
			const { status } = await world.observer.submit(`/g/${world.slug}${path}`, fields);
			expect([path, status]).toEqual([path, 403]);
		}
		expect(await digests()).toEqual(before);
	});

	it('a maintainer makes nobody an owner, and takes nothing from one', async () => {
		const { maintainer, slug, ids } = world;
		const at = `/g/${slug}/members`;
		const before = await digests();
		const tries: readonly (readonly [door: string, fields: Fields])[] = [
			['invite', { role: 'owner' }],
			['mail', { emails: 'friend@elsewhere.example', role: 'owner' }],
			['role', { user: ids.owner, role: 'observer' }],
			['role', { user: ids.member, role: 'owner' }],
			['remove', { user: ids.owner }],
			['transfer', { user: ids.member }]
		];
		for (const [door, fields] of tries) {
			const { status } = await maintainer.submit(`${at}?/${door}`, fields);
			expect([door, status]).toEqual([door, 403]);
		}
		const page = await (await maintainer.get(`/g/${slug}/settings`)).text();
		const version = /name="version"[^>]*value="([^"]*)"/.exec(page)?.[1] ?? '';
		expect(version).not.toBe('');
		const words = { name: 'Quince Yard', description: '', budgetSeconds: '', version };
		const moved = await maintainer.submit(`/g/${slug}/settings?/save`, {
			...words,
			slug: 'taken-over'
		});
		expect(moved.status).toBe(403);
		expect(await digests()).toEqual(before);
	});

	it('fields that no form has change nothing but what the form is for', async () => {
		const { member, slug, ids } = world;
		const more = {
			role: 'owner',
			isAdmin: '1',
			groupId: 'other',
			group_id: 'other',
			state: 'accepted',
			createdBy: ids.owner,
			submittedBy: ids.owner,
			authorId: ids.owner,
			verdict: 'agreement',
			id: '00000000-0000-7000-8000-000000000000',
			__proto__polluted: 'yes',
			'constructor.prototype.polluted': 'yes'
		};
		const said = await member.submit(`/g/${slug}/claims/${world.claim}?/comment`, {
			...more,
			body: 'With more fields.'
		});
		expect(said.status).toBe(303);
		const row = await world.id(
			"SELECT author_id || ' ' || id FROM comments WHERE body = 'With more fields.'"
		);
		expect(row.startsWith(ids.member)).toBe(true);
		expect(row).not.toContain(more.id);
		const entered = await member.sendJson('POST', `/api/v1/groups/${slug}/claims`, {
			...claimFields({ printed: '2.8284', bibtex: bibtexOf(903) }),
			...more
		});
		expect(entered.status).toBe(201);
		const claim = await world.id(
			`SELECT created_by || ' ' || visibility FROM claims ORDER BY id DESC LIMIT 1`
		);
		expect(claim).toBe(`${ids.member} group`);
		const person = await newPerson(server, { ...more, name: 'Role Wanted' });
		expect((await person.get('/admin/mail')).status).toBe(404);
		expect(await world.id('SELECT count(*) FROM users WHERE is_admin = 1')).toBe('0');
		await atRest(server);
	});
});

describe('after leaving', () => {
	it('a calendar, news, files and mail of the group are gone', async () => {
		const { member, owner, slug, ids, calendar } = world;
		expect((await world.anonymous.get(calendar)).status).toBe(200);
		const out = await owner.submit(`/g/${slug}/members?/remove`, { user: ids.member });
		expect(out.status).toBe(200);
		expect((await world.anonymous.get(calendar)).status).toBe(404);
		expect((await member.get(`/g/${slug}/files/${ids.file}`)).status).toBe(404);
		const news = (await (await member.get('/api/v1/news')).json()) as { items: unknown[] };
		expect(news.items).toEqual([]);
		for (const path of ['/home', '/home/tasks', '/news', '/account']) {
			const page = await (await member.get(path)).text();
			expect([path, page.includes('Quince Yard')]).toEqual([path, false]);
		}
		const waiting = `SELECT count(*) FROM outbox WHERE user_id = '${ids.member}' AND state = 'waiting'`;
		await owner.submit(`/g/${slug}/claims/${world.claim}?/comment`, { body: 'Who is left?' });
		expect(await world.id(waiting)).toBe('0');
	});
});
