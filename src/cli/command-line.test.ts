import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { parseSdpa } from '../lib/nonlocality/optimization/sdpa-text';
import { readProblem } from './problem-input';
import { EXIT, readJson } from './read-input';

/** Starting a command takes a second alone and several on a busy machine. */
const TIMEOUT = 60_000;

let directory = '';
beforeAll(() => {
	directory = mkdtempSync(join(tmpdir(), 'merestone-command-'));
});
afterAll(() => rmSync(directory, { recursive: true, force: true }));

function run(command: string, args: string[], input?: string) {
	const script = `src/cli/${command}.ts`;
	const { status, stdout, stderr } = spawnSync('node_modules/.bin/tsx', [script, ...args], {
		input,
		encoding: 'utf8',
		timeout: TIMEOUT
	});
	return { status, stdout, stderr };
}

const file = (name: string, content: unknown) => {
	const path = join(directory, name);
	writeFileSync(path, typeof content === 'string' ? content : JSON.stringify(content));
	return path;
};

describe('bound', () => {
	it(
		'prints the programme of a relaxation instead of solving it',
		() => {
			const problem = { family: { name: 'chsh' }, quantity: 'npa', level: 1 };
			const printed = run('bound', ['--sdpa', '-'], JSON.stringify(problem));
			expect(printed).toMatchObject({ status: 0, stderr: '' });
			// Level 1 of two inputs each: 1 and four projectors, so 5 rows and 10 free moments.
			const { blocks, objective } = parseSdpa(printed.stdout);
			expect(blocks).toEqual([5]);
			expect(objective).toHaveLength(10);
			const local = run(
				'bound',
				['--sdpa', '-'],
				JSON.stringify({ ...problem, quantity: 'local' })
			);
			expect(local).toMatchObject({ status: EXIT.malformed, stdout: '' });
			const mermin = { family: { name: 'mermin', n: 3 }, quantity: 'npa', level: 1 };
			const lacking = run('bound', ['--sdpa', '-'], JSON.stringify(mermin));
			expect(lacking).toMatchObject({ status: EXIT.unfinished, stdout: '' });
			expect(lacking.stderr).toContain('level 2');
		},
		TIMEOUT
	);

	it(
		'explains itself, with examples that work',
		() => {
			const { status, stdout } = run('bound', ['--help']);
			expect(status).toBe(0);
			const quantities = ['value', 'local', 'no-signalling', 'npa', 'see-saw', 'quantum'];
			for (const quantity of quantities) expect(stdout).toMatch(new RegExp(`^  ${quantity} `, 'm'));
			for (const code of Object.values(EXIT)) {
				if (code !== EXIT.unchecked) expect(stdout).toMatch(new RegExp(`\\b${code} `));
			}
			const examples = [...stdout.matchAll(/echo '([^']+)'/g)].map(([, json]) => json ?? '');
			expect(examples.length).toBeGreaterThan(2);
			for (const json of examples) expect(() => readProblem(JSON.parse(json))).not.toThrow();
		},
		TIMEOUT
	);
});

describe('bound and verify-certificate', () => {
	it(
		'recompute, check, and catch a change',
		() => {
			const problem = { family: { name: 'chsh' }, quantity: 'npa', level: 1 };
			const bound = run('bound', ['-'], JSON.stringify(problem));
			expect(bound.status).toBe(0);
			const result = JSON.parse(bound.stdout);
			// Cirel'son, Lett. Math. Phys. 4, 93 (1980): 2 sqrt(2)
			expect(result).toMatchObject({ format: 1, status: 'done', quantity: 'npa' });
			expect(result.upper).toBeGreaterThanOrEqual(2 * Math.SQRT2);
			expect(result.upper).toBeLessThan(2 * Math.SQRT2 + 1e-7);

			const good = run('verify-certificate', [file('good.json', bound.stdout)]);
			expect(good.status).toBe(0);
			const { bound: fraction } = result.certificate;
			expect(JSON.parse(good.stdout)).toMatchObject({ checked: true, exactBound: fraction });

			const changed = { ...result.certificate, bound: '14/5' };
			const lower = { ...result, upper: 2.8, certificate: changed };
			const bad = run('verify-certificate', [file('bad.json', lower)]);
			expect(bad.status).toBe(1);
			expect(JSON.parse(bad.stdout)).toMatchObject({ checked: false });
			expect(bad.stderr).toMatch(/not checked: the certificate proves \d+\/\d+, not the printed/);
		},
		TIMEOUT
	);

	it(
		'name what is malformed on standard error, with nothing on standard output',
		() => {
			const path = file('malformed.json', {
				outputs: [[2]],
				terms: [['1/0', []]],
				quantity: 'local'
			});
			const { status, stdout, stderr } = run('bound', [path]);
			expect(status).toBe(2);
			expect(stdout).toBe('');
			expect(stderr).toBe('terms[0][0]: division by zero (at position 0)\n');
		},
		TIMEOUT
	);
});

describe('exit codes', () => {
	it.each<[unknown, number, RegExp]>([
		[{ quantity: 'local' }, EXIT.malformed, /^terms: is missing/],
		[
			{ quantity: 'local', family: { name: 'cglmp', d: 99 } },
			EXIT.limit,
			/^family: d must be an integer from 2 to 12/
		],
		[{ quantity: 'visibility' }, EXIT.unfinished, /no solver for this quantity yet: visibility/]
	])('%j', (json, exitCode, message) => {
		expect(() => readProblem(json)).toThrow(message);
		expect(() => readProblem(json)).toThrow(expect.objectContaining({ exitCode }));
	});

	it('explains its use and unreadable files', () => {
		expect(() => readJson('usage', [])).toThrow('usage');
		expect(() => readJson('usage', ['a', 'b'])).toThrow('usage');
		expect(() => readJson('usage', [join(directory, 'none.json')])).toThrow(/can't be read/);
		expect(() => readJson('usage', [file('broken.json', '{"a": ')])).toThrow(/is not JSON/);
	});
});
