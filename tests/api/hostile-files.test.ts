import { readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { TASK_LIMITS } from '../../src/lib/schemas/task-input';
import { handIn, hostileWorld, type HostileWorld } from '../support/hostile-world';
import { startServer, type TestServer } from '../support/server';

let server: TestServer;
let world: HostileWorld;
let task: string;

beforeAll(async () => {
	server = await startServer();
	world = await hostileWorld(server, 'Plinth Walk');
	task = `/g/${world.slug}/tasks/${world.task}`;
	const back = await world.maintainer.submit(`${task}?/return`, { reason: 'Once more.' });
	expect(back.status).toBe(200);
});
afterAll(() => server.stop());

const STATEMENT = { kind: 'value', printed: '2.8284', program: 'own program', programVersion: '3' };
const bytes = (text: string) => new TextEncoder().encode(text);
const joined = (...parts: readonly (Uint8Array | string)[]) =>
	new Uint8Array(Buffer.concat(parts.map((part) => Buffer.from(part))));

// The first bytes of each format, as its own specification has them.
const PNG = Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
const GIF = bytes('GIF89a');
const PAGE = '<!doctype html><script>steal()</script>';
const SVG = '<svg xmlns="http://www.w3.org/2000/svg" onload="steal()"/>';
const MACHINE = Uint8Array.from([0x4d, 0x5a, 0x90, 0x00, 0x03, 0, 0, 0]);

describe('files that are not what they say', () => {
	it.each<[string, string, Uint8Array<ArrayBuffer> | string]>([
		['a page', 'page.html', PAGE],
		['a page called a picture', 'page.png', PAGE],
		['a drawing', 'drawing.svg', SVG],
		['a drawing called a picture', 'drawing.jpg', SVG],
		['a script', 'x.js', 'steal()'],
		['a page in XML', 'x.xhtml', PAGE],
		['a program', 'x.exe', joined(MACHINE)],
		['a program called a log', 'x.log', joined(MACHINE)],
		['a program called a paper', 'paper.pdf', joined(MACHINE, '%PDF-1.7')],
		['a picture called a paper', 'paper.pdf', joined(PNG, '%PDF-1.7')],
		['an animation called a picture', 'x.png', joined(GIF, SVG)],
		['a double ending', 'x.txt.html', PAGE],
		['an ending in capitals', 'X.HTML', PAGE],
		['an ending and a blank', 'x.html ', PAGE],
		['an ending and a dot', 'x.html.', PAGE],
		['an ending and a stream', 'x.txt::$DATA.html', PAGE],
		['no ending', 'Makefile', 'all:'],
		['nothing', 'empty.txt', ''],
		['nothing but an ending', '.txt', 'x'],
		['one byte too many', 'large.txt', new Uint8Array(TASK_LIMITS.fileBytes + 1).fill(48)]
	])('%s is refused, with what was typed', async (_, name, content) => {
		const before = stored();
		const response = await handIn(world.member, task, STATEMENT, [[name, content]]);
		expect([400, 413]).toContain(response.status);
		expect(await response.text()).toContain('own program');
		expect(stored()).toEqual(before);
	});

	it('six are refused where five are taken, and all when one is bad', async () => {
		const before = stored();
		const six = Array.from({ length: 6 }, (_, i) => [`${i}.txt`, 'x'] as const);
		expect((await handIn(world.member, task, STATEMENT, six)).status).toBe(400);
		const bad = [...six.slice(0, 2), ['x.html', PAGE] as const];
		expect((await handIn(world.member, task, STATEMENT, bad)).status).toBe(400);
		expect(stored()).toEqual(before);
	});
});

/** What the storage holds, with its size. */
function stored(): readonly (readonly [string, number])[] {
	const folder = join(server.folder, 'files');
	return readdirSync(folder, { recursive: true, withFileTypes: true })
		.filter((entry) => entry.isFile())
		.map((entry) => join(entry.parentPath, entry.name))
		.map((path) => [path, statSync(path).size] as const)
		.sort(([a], [b]) => a.localeCompare(b));
}

describe('names and contents that try to get out', () => {
	it('are kept under generated keys, never unpacked, and come back as attachments', async () => {
		// Ten megabytes of nothing in ten kilobytes: stored as it came.
		const bomb = new Uint8Array(gzipSync(new Uint8Array(10_000_000)));
		const names = [
			['../../../../tmp/escaped.txt', 'x'],
			['CON.txt', 'x'],
			[`${'n'.repeat(300)}.txt`, PAGE],
			['a"; filename="b.html"; x=".txt', PAGE],
			['bomb.gz', bomb]
		] as const;
		const before = stored();
		const response = await handIn(world.member, task, STATEMENT, names);
		expect(response.status).toBe(200);
		const kept = stored().filter(([path]) => !before.some(([old]) => old === path));
		expect(kept).toHaveLength(5);
		for (const [path] of kept) {
			expect(path.slice(server.folder.length)).toMatch(/^\/files\/[\w/-]+$/);
		}
		expect(kept.map(([, size]) => size)).toContain(bomb.byteLength);
		const page = await (await world.member.get(task)).text();
		const links = [...new Set(page.match(/\/g\/[\w-]+\/files\/[\w-]+/g))];
		expect(links.length).toBeGreaterThanOrEqual(5);
		for (const link of links) {
			const file = await world.member.get(link);
			expect(file.headers.get('content-disposition')).toMatch(
				/^attachment; filename="[ !#-[\]-~]*"; filename\*=UTF-8''[\w!#$&+.^`|~%-]+$/
			);
			expect(file.headers.get('x-content-type-options')).toBe('nosniff');
			expect(file.headers.get('content-security-policy')).toContain("default-src 'none'");
			expect(file.headers.get('content-type')).not.toMatch(/html|svg|xml|script/);
			expect(file.headers.get('cache-control')).toContain('no-store');
		}
	});
});
