import fc from 'fast-check';
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { solve, verifyResult } from '../../src/lib/nonlocality';
import { parseRational, toDouble } from '../../src/lib/nonlocality/exact/rational';
import type { DoneResult, Result } from '../../src/lib/nonlocality/problem';
import { termsOfFunctional } from '../../src/lib/nonlocality/scenario/problem-terms';
import { parseProblem } from '../../src/lib/schemas/problem';
import { randomFunctional } from '../factories/random-functional';
import { lehmer, quietControl } from '../factories/solver-problem';
import { asJson, singleChange } from '../support/changed-json';

/** The checker in Python stands on the README's text alone; it needs no more than python3. */
const SCRIPT = 'tests/certificates/check_exact.py';
const python = spawnSync('python3', ['--version']).status === 0;
if (!python) process.stdout.write('no python3 here: the checker in Python is not run\n');

interface Answer {
	readonly checked: boolean;
	readonly lower?: string | null;
	readonly upper?: string | null;
	readonly reason?: string;
}

let folder = '';
beforeAll(() => {
	folder = mkdtempSync(join(tmpdir(), 'exact-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

/** One answer for each result. */
function askPython(results: readonly unknown[]): Answer[] {
	const files = results.map((result, i) => {
		const file = join(folder, `${i}.json`);
		writeFileSync(file, JSON.stringify(result));
		return file;
	});
	const { stdout, stderr } = spawnSync('python3', [SCRIPT, ...files], { encoding: 'utf8' });
	if (stderr) throw new Error(stderr);
	return stdout
		.trim()
		.split('\n')
		.map((line) => JSON.parse(line) as Answer);
}

/** Per problem. */
const CHANGES = 60;

const random = lehmer(20_261_201);
function drawn(outputs: number[][]) {
	const f = randomFunctional(outputs, 5, random);
	return { outputs, terms: termsOfFunctional(f) };
}
const constraints = [
	{ terms: [['1/3', [[0, 0, 0]]]], relation: '=', value: '1/7' },
	{ terms: [['2', [[1, 0, 0]]]], relation: '<=', value: 1.5 },
	{ terms: [['1', [[1, 1, 0]]]], relation: '>=', value: '0.25' }
];

const PROBLEMS: readonly (readonly [string, object])[] = [
	['I3322 locally', { family: { name: 'i3322' }, quantity: 'local' }],
	['three parties locally, min', { family: { name: 'gyni', n: 3 }, quantity: 'local', sense: 'min' }],
	['a random functional locally', { ...drawn([[2, 3], [3, 2]]), quantity: 'local' }],
	['CGLMP without signalling', { family: { name: 'cglmp', d: 3 }, quantity: 'no-signalling' }],
	['three parties without signalling', { family: { name: 'gyni', n: 3 }, quantity: 'no-signalling' }],
	['a random functional without signalling, constrained', { ...drawn([[2, 2], [2, 3]]), quantity: 'no-signalling', sense: 'min', constraints }],
	['CHSH at level 1', { family: { name: 'chsh' }, quantity: 'npa', level: 1 }],
	['I3322 at level 2, min', { family: { name: 'i3322' }, quantity: 'npa', level: 2, sense: 'min' }],
	['CGLMP with rows', { family: { name: 'cglmp', d: 3 }, quantity: 'npa', level: 1, nonNegative: true }],
	['CGLMP at 1+AB', { family: { name: 'cglmp', d: 3 }, quantity: 'npa', level: '1+AB', sense: 'min' }],
	['a constrained bound', { family: { name: 'chsh' }, quantity: 'npa', level: '1+AB', constraints }],
	['a random functional at a list of products', { ...drawn([[2, 3], [3, 2]]), quantity: 'npa', level: { products: ['A', 'B', 'AB', 'AA'] } }],
	['three parties, marginal rows', { ...drawn([[2, 2], [2], [2]]), quantity: 'npa', level: 2, nonNegative: true }],
	['four parties', { ...drawn([[2], [2], [2], [2]]), quantity: 'npa', level: { perParty: 1 } }]
]; // prettier-ignore

describe.skipIf(!python)('a checker written from the README alone', () => {
	const found = new Map<string, DoneResult>();
	beforeAll(async () => {
		for (const [name, problem] of PROBLEMS) {
			const result = await solve(parseProblem(problem), quietControl);
			if (result.status !== 'done') throw new Error(`${name}: ${result.reason}`);
			found.set(name, result);
		}
	});

	it('proves what is printed of every problem, and the same fractions', () => {
		const results = [...found.values()];
		const answers = askPython(results);
		expect(answers).toHaveLength(PROBLEMS.length);
		answers.forEach((answer, i) => {
			const result = results[i];
			expect(answer).toMatchObject({ checked: true });
			if (!result) return;
			const own = verifyResult(result);
			if (!own.checked) throw new Error(own.reason);
			const bound = result.problem.sense === 'min' ? answer.lower : answer.upper;
			if (own.exactBound !== undefined) expect(bound).toBe(own.exactBound);
			if (own.exact !== null) expect(answer).toMatchObject({ lower: own.exact, upper: own.exact });
		});
	});

	it.each(PROBLEMS.map(([name]) => name))('%s, changed, is refused or still proved', (name) => {
		const result = found.get(name);
		if (!result) throw new Error('no result');
		const moments = result.certificate?.kind === 'npa-exact';
		const min = result.problem.sense === 'min';
		// The feasible side is in doubles, which is not for this checker.
		const without = { moments: null, feasibleValue: null };
		const feasible = min ? 'upper' : 'lower';
		const stripped = moments
			? { ...result, [feasible]: null, guaranteed: { ...result.guaranteed, [feasible]: false } }
			: result;
		const fields = Object.entries(result.certificate ?? {}).filter(([key]) => !(key in without));
		const changes = fc.sample(singleChange(asJson(Object.fromEntries(fields))), {
			numRuns: CHANGES,
			seed: 5
		});
		const results = changes.map((changed) => {
			const certificate = { ...Object(changed), ...(moments && without) };
			return asJson({ ...stripped, certificate });
		});
		const answers = askPython(results);
		expect(answers.filter((answer) => !answer.checked).length).toBeGreaterThan(CHANGES / 4);
		answers.forEach((answer, i) => {
			const own = verifyResult(results[i] as unknown as Result);
			expect({ ...answer, change: changes[i] }).toMatchObject({ checked: own.checked });
			if (!answer.checked) return;
			const value = (text: string | null | undefined) => {
				const read = text ? parseRational(text) : null;
				return read && toDouble(read);
			};
			const lower = value(answer.lower);
			const upper = value(answer.upper);
			if (upper !== null) expect(upper).toBeGreaterThanOrEqual(result.lower ?? -Infinity);
			if (lower !== null) expect(lower).toBeLessThanOrEqual(result.upper ?? Infinity);
		});
	});
});
