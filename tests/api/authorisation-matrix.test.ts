import { createClient } from '@libsql/client';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { matrixWorld, SECRET, type MatrixWorld } from '../support/matrix-world';
import { startServer, type TestServer } from '../support/server';
import { EVERYONE, MATRIX, type MatrixRow, type Who } from './authorisation-matrix';

const METHODS = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'];

/** Routes that are pages. */
function pagesInFiles(): string[] {
	return readdirSync('src/routes', { recursive: true, encoding: 'utf8' })
		.filter((path) => /(^|\/)\+page\.svelte$/.test(path))
		.map((path) => `/${path.replace(/\/?\+page\.svelte$/, '')}`)
		.map((route) => route.replace(/\/\([^)]*\)/g, '') || '/');
}

/** Every door of the routes: `GET /g/[slug]`, `invite /g/[slug]/members`, found in the files. */
function doorsInFiles(): string[] {
	const doors = new Set<string>();
	for (const path of readdirSync('src/routes', { recursive: true, encoding: 'utf8' })) {
		const [, folder = '', file = ''] = /^(.*?)\/?(\+[\w.]+)$/.exec(path) ?? [];
		const route = `/${folder}`.replace(/\/\([^)]*\)/g, '') || '/';
		const text = file && readFileSync(join('src/routes', path), 'utf8');
		if (file === '+page.svelte') doors.add(`GET ${route}`);
		if (file === '+server.ts') {
			for (const [, method] of text.matchAll(/^export (?:const|async function|function) (\w+)/gm)) {
				doors.add(`${method} ${route}`);
			}
		}
		const actions = text.split(/^export const actions\b/m)[1] ?? '';
		if (file === '+page.server.ts') {
			for (const [, name] of actions.matchAll(/^\t(\w+)(?:: |\()/gm)) doors.add(`${name} ${route}`);
			if (actions.includes('discussionActions(')) {
				for (const name of discussionDoors()) doors.add(`${name} ${route}`);
			}
		}
	}
	return [...doors].sort();
}

/** The actions that a page with a discussion spreads into its own. */
function discussionDoors(): string[] {
	const text = readFileSync('src/lib/server/http/discussion-actions.ts', 'utf8');
	return [...text.matchAll(/^\t\t'?([\w-]+)'?: action\(/gm)].map(([, name]) => name ?? '');
}

let server: TestServer;
let world: MatrixWorld;
beforeAll(async () => {
	server = await startServer();
	world = await matrixWorld(server);
});
afterAll(() => server.stop());

async function knock(row: MatrixRow, who: Who): Promise<{ status: number; text: string }> {
	const visitor = world[who];
	const path = row.path(world);
	const json = row.json?.(world);
	const method = METHODS.includes(row.door) ? row.door : 'POST';
	const isAction = method !== row.door;
	const target = isAction && row.door !== 'default' ? `${path}?/${row.door}` : path;
	const response =
		isAction || (method === 'GET' && !json)
			? await visitor.request(target, {
					method,
					...(isAction && { body: new URLSearchParams(row.fields) })
				})
			: await visitor.sendJson(method, path, json ?? {});
	if (response.headers.get('content-type')?.startsWith('text/event-stream')) {
		await response.body?.cancel();
		return { status: response.status, text: '' };
	}
	return { status: response.status, text: await response.text() };
}

/** What a page's data says when its script asks, in the terms of a page: 303, 404, 200 ... */
async function knockForData(row: MatrixRow, who: Who): Promise<{ status: number; text: string }> {
	const path = row.path(world).replace(/\/$/, '');
	const response = await world[who].get(`${path}/__data.json`);
	const text = await response.text();
	if (response.status !== 200) return { status: response.status, text };
	const data: { type: string; nodes?: ({ type: string; status?: number } | null)[] } =
		JSON.parse(text);
	if (data.type === 'redirect') return { status: 303, text };
	const failed = data.nodes?.find((node) => node?.type === 'error');
	return { status: failed ? (failed.status ?? 500) : 200, text };
}

const isOutside = (who: Who) => who === 'anonymous' || who === 'outsider';

const name = ({ door, route }: MatrixRow) => `${door} ${route}`;

describe('the authorisation matrix', () => {
	it('has a row for every door, and none for doors that are gone', () => {
		const rows = new Set([...MATRIX.map(name), 'POST /sign-out']);
		const doors = doorsInFiles();
		expect(doors.filter((door) => !rows.has(door))).toEqual([]);
		expect([...rows].filter((row) => !doors.includes(row))).toEqual([]);
	});

	it.each(MATRIX.map((row) => [name(row), row] as const))('%s', async (_, row) => {
		const answers: Partial<Record<Who, number>> = {};
		for (const who of EVERYONE) {
			const { status, text } = await knock(row, who);
			answers[who] = status;
			if (isOutside(who)) expect(text.includes(SECRET), `${who} reads the secret`).toBe(false);
		}
		expect(answers).toEqual(row.answers);
	});

	// An endpoint, such as a file to download, is no page and has no data of its own.
	const withPage = new Set(pagesInFiles());
	const pages = MATRIX.filter(({ door, route }) => door === 'GET' && withPage.has(route));
	it.each(pages.map((row) => [row.route, row] as const))('data of %s', async (_, row) => {
		const answers: Partial<Record<Who, number>> = {};
		for (const who of EVERYONE) {
			const { status, text } = await knockForData(row, who);
			answers[who] = status;
			if (isOutside(who)) expect(text.includes(SECRET), `${who} reads the secret`).toBe(false);
		}
		expect(answers).toEqual(row.answers);
	});

	it('tells an outsider nothing of whether a group exists', async () => {
		const there = await world.outsider.get(`/g/${world.slug}`);
		const nowhere = await world.outsider.get('/g/no-such-group');
		expect(there.status).toBe(nowhere.status);
		const words = async (response: Response) =>
			/<h1[\s\S]*?<\/main>/.exec(await response.text())?.[0];
		expect(await words(there)).toBe(await words(nowhere));
	});

	it('signs out without a session, and with one only from this site', async () => {
		const out = await world.anonymous.submit('/sign-out');
		expect(out.status).toBe(303);
	});

	it('lets reading change nothing', async () => {
		const before = await contents(server.databaseUrl);
		for (const row of pages) {
			await (await world.owner.get(row.path(world))).body?.cancel();
		}
		expect(await contents(server.databaseUrl)).toEqual(before);
	});
});

/** How many rows each table has and when the newest change was, but for what runs by itself. */
async function contents(url: string): Promise<Record<string, unknown>> {
	const client = createClient({ url });
	const tables = await client.execute(
		"SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite%'"
	);
	const counts: Record<string, unknown> = {};
	for (const { name } of tables.rows) {
		const { rows } = await client.execute(`SELECT count(*) AS n FROM "${String(name)}"`);
		counts[String(name)] = rows[0]?.n;
	}
	counts.lastAudit = (await client.execute('SELECT max(id) AS id FROM audit')).rows[0]?.id;
	client.close();
	return counts;
}
