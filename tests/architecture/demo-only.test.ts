import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';

const SINK = join('src', 'lib', 'server', 'mail', 'sink.ts');
const STATIC_IMPORT = /^(?:import|export) (?!type )[^;]*? from '([^']+)'/gm;

const sources = readdirSync('src', { recursive: true, encoding: 'utf8' })
	.map((file) => join('src', file))
	.filter((file) => /\.(ts|svelte)$/.test(file) && !file.endsWith('.test.ts'))
	.map((file) => ({
		file,
		imports: [...readFileSync(file, 'utf8').matchAll(STATIC_IMPORT)].map(([, from]) => from ?? '')
	}));

it('a server that is no demo never loads what catches its mail', () => {
	const catching = (from: string) => from === 'mailparser' || from === 'smtp-server';
	const users = sources.filter(({ imports }) => imports.some(catching)).map(({ file }) => file);
	expect(users).toEqual([SINK]);
	const eager = sources.filter(({ imports }) => imports.some((from) => from.endsWith('mail/sink')));
	expect(eager.map(({ file }) => file)).toEqual([]);
});
