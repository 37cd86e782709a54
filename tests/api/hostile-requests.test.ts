import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { atRest, hostileWorld, type HostileWorld } from '../support/hostile-world';
import { joiningLink, PASSWORD } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import type { Visitor } from '../support/visitor';
import { tableDigests } from '../support/whole-database';

let server: TestServer;
let world: HostileWorld;

beforeAll(async () => {
	server = await startServer();
	world = await hostileWorld(server, 'Ashlar Close');
});
afterAll(() => server.stop());

/** A session's last use is written down by whatever request; nothing else may be. */
const digests = () => tableDigests(server.databaseUrl, ['sessions']);

/** Ends and breaks of SQL after the kinds that OWASP's testing guide names, written for this test. */
const SQL = [
	"'",
	'"',
	"' OR '1'='1",
	"'; DROP TABLE tasks; --",
	"1' UNION SELECT password_hash FROM users --",
	'1) OR (SELECT 1',
	"' || (SELECT token_hash FROM invitations) || '",
	'%',
	'_%_',
	'\\',
	'*/ OR 1=1 /*',
	'\u0000',
	'\ud800',
	'NaN',
	'-1',
	'1e309',
	'9007199254740993',
	'999999999999999999999999',
	'[object Object]',
	'__proto__',
	'constructor',
	'../../../etc/passwd',
	'x'.repeat(5_000)
] as const;

const PARAMETERS = {
	tasks: ['q', 'state', 'kind', 'assignee', 'overdue', 'sort', 'view', 'page'],
	activity: ['kind', 'person', 'claim', 'from', 'to', 'page'],
	claims: ['q', 'status', 'sort', 'page', 'numbers'],
	page: ['page'],
	own: ['state', 'group', 'sort', 'page', 'show'],
	mail: ['state', 'page']
} as const;

function lists(slug: string): readonly (readonly [path: string, parameters: readonly string[]])[] {
	return [
		[`/g/${slug}/tasks`, PARAMETERS.tasks],
		[`/api/v1/groups/${slug}/tasks`, PARAMETERS.tasks],
		[`/g/${slug}/tasks/new`, ['claims']],
		[`/g/${slug}/activity`, PARAMETERS.activity],
		[`/api/v1/groups/${slug}/activity`, PARAMETERS.activity],
		[`/g/${slug}/activity.csv`, PARAMETERS.activity],
		[`/g/${slug}/claims/1`, ['history']],
		[`/g/${slug}`, PARAMETERS.claims],
		[`/api/v1/groups/${slug}/claims`, PARAMETERS.claims],
		['/api/v1/inequalities', ['group', 'q']],
		['/home/tasks', PARAMETERS.own],
		['/news', PARAMETERS.page],
		['/api/v1/news', PARAMETERS.page],
		['/admin/mail', PARAMETERS.mail]
	];
}

describe('a list asked with SQL and other nonsense', () => {
	it('answers, finds nothing it should not, and changes nothing', async () => {
		const before = await digests();
		const odd: string[] = [];
		for (const [path, parameters] of lists(world.slug)) {
			// A page costs more than an answer of the API, which asks the same service.
			const one = path.startsWith('/api/') ? parameters.map((name) => [name]) : [];
			for (const names of [parameters, ...one]) {
				for (const text of SQL) {
					const query = new URLSearchParams(names.map((name) => [name, text]));
					const response = await world.owner.get(`${path}?${query}`);
					const body = await response.text();
					if (response.status >= 500) odd.push(`${response.status} ${path}?${query}`);
					if (body.includes('$argon2')) odd.push(`a hash at ${path}?${query}`);
				}
			}
		}
		expect(odd).toEqual([]);
		expect(await digests()).toEqual(before);
	});

	it('an address made of it leads nowhere', async () => {
		const { owner, slug } = world;
		const odd: string[] = [];
		for (const text of SQL.slice(0, -1)) {
			const part = encodeURIComponent(text.replaceAll('\ud800', '\ufffd'));
			for (const path of [
				`/g/${part}/tasks`,
				`/g/${slug}/tasks/${part}`,
				`/g/${slug}/files/${part}`,
				`/g/${slug}/submissions/${part}/certificate`,
				`/calendar/${part}.ics`,
				`/unsubscribe/${part}`,
				`/join/${part}`,
				`/claims/${part}/answer`,
				`/api/v1/groups/${slug}/tasks/${part}`
			]) {
				const { status } = await owner.get(path);
				if (![400, 404].includes(status)) odd.push(`${status} ${path}`);
			}
		}
		expect(odd).toEqual([]);
	});
});

/** Every page, file and answer that a person can get to by following addresses. */
async function crawl(visitor: Visitor, starts: readonly string[]): Promise<Map<string, number>> {
	const seen = new Map<string, number>();
	const waiting = [...starts];
	for (let path = waiting.shift(); path !== undefined && seen.size < 250; path = waiting.shift()) {
		if (seen.has(path)) continue;
		const response = await visitor.get(path);
		seen.set(path, response.status);
		const location = response.headers.get('location');
		const html = /html/.test(response.headers.get('content-type') ?? '');
		const text = await response.text();
		const found = html
			? [...text.matchAll(/\b(?:href|src|action)="(\/[^"#]*)/g)].map((match) => match[1] ?? '')
			: [];
		if (location?.startsWith('/')) found.push(location);
		for (const next of found) {
			// One of each kind of query is enough.
			const [plain = '', query] = next.replaceAll('&amp;', '&').split('?');
			if (plain.startsWith('/_app/') || plain === '/sign-out') continue;
			const known = [...seen.keys(), ...waiting].filter((each) => each.startsWith(`${plain}?`));
			if (query === undefined || query.startsWith('/')) waiting.push(plain);
			else if (known.length < 4) waiting.push(`${plain}?${query}`);
		}
	}
	return seen;
}

describe('looking', () => {
	it.each(['anonymous', 'observer', 'owner'] as const)(
		'at everything the %s can get to writes nothing and breaks nothing',
		async (who) => {
			const { slug, ids, claim, claimId, task, calendar } = world;
			const api = `/api/v1/groups/${slug}`;
			const link = await joiningLink(world.owner, slug, 'observer');
			const mails = server.mail.caught().map(({ text }) => text);
			const unsubscribe = /\/unsubscribe\/[\w.-]+/.exec(mails.join('\n'))?.[0];
			expect(unsubscribe).toBeDefined();
			await atRest(server);
			const before = await digests();
			const seen = await crawl(world[who], [
				...['/', '/home', '/home/tasks', '/news', '/account', '/account/notifications'],
				...[`/g/${slug}`, `/g/${slug}/settings`, `/claims/${claimId}`, `/claims/${claimId}/answer`],
				...[`${api}/tasks`, `${api}/tasks/${task}`, `${api}/activity`, '/api/v1/news'],
				...[`${api}/claims/${claim}/tasks`, `${api}/claims/${claim}/progress`],
				...[`/g/${slug}/files/${ids.file}`, `/g/${slug}/activity.csv`, `/g/${slug}/ledger.csv`],
				...[calendar, link, unsubscribe ?? '', '/admin/mail', '/demo/mail', '/method'],
				...['/home', `/g/${slug}`, `/g/${slug}/tasks/${task}`].map((path) => `${path}/__data.json`)
			]);
			const broken = [...seen].filter(([, status]) => status >= 500);
			expect(broken).toEqual([]);
			expect(seen.size).toBeGreaterThan(who === 'anonymous' ? 25 : 40);
			expect(await digests()).toEqual(before);
		}
	);
});

describe('a body that is no form of ours', () => {
	const broken: readonly (readonly [what: string, type: string | null, body: string])[] = [
		['multipart without its boundary', 'multipart/form-data', 'x'],
		[
			'multipart that ends early',
			'multipart/form-data; boundary=b',
			'--b\r\nContent-Disposition: '
		],
		['multipart without names', 'multipart/form-data; boundary=b', '--b\r\n\r\nx\r\n--b--\r\n'],
		['JSON', 'application/json', '{"role":"owner"}'],
		['text', 'text/plain', 'role=owner'],
		['nothing said', null, 'x'],
		['half an escape', 'application/x-www-form-urlencoded', 'id=%E0%A4%A&kind=%'],
		['a prototype', 'application/x-www-form-urlencoded', '__proto__=1&__proto__[x]=1'],
		['Superforms’ own, broken', 'application/x-www-form-urlencoded', '__superform_json=%5B%7B'],
		['Superforms’ own, circular', 'application/x-www-form-urlencoded', '__superform_json=[[0]]'],
		[
			'Superforms’ own, of maps',
			'application/x-www-form-urlencoded',
			'__superform_json=[["Map",1,2],"a",0]'
		],
		['Superforms’ own, an id', 'application/x-www-form-urlencoded', '__superform_id=x&name=a']
	];

	it.each(broken)('%s is refused, not stumbled over', async (_, type, body) => {
		const { owner, slug, claim, claimId, task } = world;
		const before = await digests();
		const odd: string[] = [];
		for (const path of [
			`/g/${slug}/tasks/${task}?/edit`,
			`/g/${slug}/tasks/${task}?/submit`,
			`/g/${slug}/tasks/${task}?/comment`,
			`/g/${slug}/tasks/${task}?/return`,
			`/g/${slug}/tasks/new?/open`,
			`/g/${slug}/claims/${claim}?/confirm`,
			`/g/${slug}/claims/${claim}?/attachNotice`,
			`/g/${slug}/claims/${claim}?/handleMessage`,
			`/g/${slug}/members?/mail`,
			`/g/${slug}/members?/role`,
			`/g/${slug}/settings?/save`,
			`/claims/${claimId}/answer`,
			'/news?/open',
			'/home/tasks?/revokeCalendar',
			'/groups/new',
			'/unsubscribe/nobody.comment.none'
		]) {
			const response = await owner.request(path, {
				method: 'POST',
				body: new TextEncoder().encode(body),
				headers: type === null ? {} : { 'Content-Type': type }
			});
			const text = await response.text();
			if (response.status < 400 || response.status >= 500) odd.push(`${response.status} ${path}`);
			if (/node_modules|at async|SQLITE/.test(text)) odd.push(`the inside shows at ${path}`);
		}
		expect(odd).toEqual([]);
		expect(await digests()).toEqual(before);
	});
});

describe('the log', () => {
	it('holds no password, cookie, secret address or anybody’s words', async () => {
		const { owner, slug, claim, calendar } = world;
		const link = await joiningLink(owner, slug, 'member');
		await world.outsider.get(link);
		await world.anonymous.get(`${calendar}?x=1`);
		await owner.submit(`/g/${slug}/claims/${claim}?/comment`, { body: 'a heron told us so' });
		await world.anonymous.submit('/sign-in', {
			email: 'reader-1@group.example',
			password: 'wrong'
		});
		await atRest(server);
		const logs = server.logs();
		const mails = server.mail.caught();
		expect(mails.length).toBeGreaterThan(3);
		const secrets = [
			PASSWORD,
			...[...owner.cookies.values()],
			link.split('/').at(-1) ?? '',
			calendar.replace(/^\/calendar\/|\.ics$/g, ''),
			...mails.flatMap(({ text }) => [
				/\/join\/([\w-]{20,})/.exec(text)?.[1] ?? PASSWORD,
				/\/unsubscribe\/([\w.-]{20,})/.exec(text)?.[1] ?? PASSWORD
			]),
			'a heron told us so',
			'Two digits are swapped.',
			'ilse@institute.example',
			'somebody@elsewhere.example'
		];
		expect(logs.length).toBeGreaterThan(100);
		expect(secrets.filter((secret) => secret === '' || logs.includes(secret))).toEqual([]);
	});
});
