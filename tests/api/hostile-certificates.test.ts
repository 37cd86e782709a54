import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { TASK_LIMITS } from '../../src/lib/schemas/task-input';
import { setSolverPool } from '../../src/lib/server/jobs/current-pool';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim, type ClaimRow } from '../../src/lib/server/services/claims/find-claim';
import { readCertificate } from '../../src/lib/server/services/submissions/read-certificate';
import { solved } from '../support/certificates';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
let claim: ClaimRow;
/** A sound one of CHSH's local maximum, 2 (Clauser, Horne, Shimony and Holt 1969), to be spoilt. */
let sound: string;

beforeAll(async () => {
	world = await openServiceWorld();
	setSolverPool(createInProcessPool());
	const { number } = await enterClaim(world.as.member, claimFields());
	claim = await findClaim(world.db.read, world.as.member, number);
	sound = await solved({ format: 1, family: { name: 'chsh' }, quantity: 'no-signalling' });
});
afterAll(() => world.close());

/** Longer than any refusal takes on a busy machine, and far from what the worst took before. */
const SOON_MS = 5_000;

const spoilt = (change: (result: Record<string, unknown>) => void): string => {
	const result = JSON.parse(sound) as Record<string, unknown>;
	change(result);
	return JSON.stringify(result);
};

/** Products of one correlator of each party with pseudorandom signs: nothing in it is alike. */
function largeProblem(parties: number, inputs: number): unknown {
	const terms: unknown[] = [];
	const add = (events: readonly (readonly number[])[]) => {
		if (events.length < parties) {
			for (let x = 0; x < inputs; x++) add([...events, [events.length, x, 0]]);
			return;
		}
		const sign = (Math.imul(terms.length + 1, 2_654_435_761) >>> 7) & 1 ? '1' : '-1';
		terms.push([sign, events]);
	};
	add([]);
	const outputs = Array.from({ length: parties }, () => Array<number>(inputs).fill(2));
	return { format: 1, outputs, terms, quantity: 'no-signalling' };
}

const deep = (open: string, close: string, many: number) => open.repeat(many) + close.repeat(many);

describe('a certificate made to cost', () => {
	it.each<[string, () => string]>([
		['two million brackets', () => deep('[', ']', 1_000_000)],
		['objects within objects', () => deep('{"a":', '', 300_000)],
		['two million digits', () => '1'.repeat(TASK_LIMITS.certificate)],
		['two million characters and one', () => ' '.repeat(TASK_LIMITS.certificate + 1)],
		['one text of two million characters', () => `"${'a'.repeat(1_999_000)}"`],
		[
			'a number past all bounds',
			() => sound.replace(/"seconds":[\d.e+-]+/, '"seconds":1e999999999')
		],
		['a power past all bounds', () => spoilt((r) => Object.assign(r, { upper: '9^9^9^9' }))],
		['a prototype', () => sound.replace('{', '{"__proto__":{"polluted":1},')],
		['a constructor', () => sound.replace('{', '{"constructor":{"prototype":{"polluted":1}},')],
		['a name twice', () => sound.replace('{', '{"format":1,')],
		[
			'a certificate of another kind’s fields',
			() => spoilt((r) => Object.assign(r, { certificate: { kind: 'npa-dual' } }))
		],
		['60 inputs each', () => spoilt((r) => Object.assign(r, { problem: largeProblem(2, 60) }))],
		['6 parties', () => spoilt((r) => Object.assign(r, { problem: largeProblem(6, 3) }))],
		[
			'20 inputs of 3 parties',
			() => spoilt((r) => Object.assign(r, { problem: largeProblem(3, 20) }))
		]
	])('by %s is refused soon, with a sentence', async (_, text) => {
		const made = text();
		const start = performance.now();
		const refused = await readCertificate(world.as.member, claim, made).catch(
			(error: unknown) => error
		);
		expect(performance.now() - start).toBeLessThan(SOON_MS);
		expect(refused).toMatchObject({ code: 'invalid', issues: [{ field: 'certificate' }] });
		expect(Object.getOwnPropertyNames(Object.prototype)).not.toContain('polluted');
	});

	it.each<[string, () => string]>([
		[
			'weights of 2,000 digits',
			() => {
				const digits = (i: number) => `${(i % 9) + 1}`.repeat(1_999);
				let i = 0;
				return sound.replace(/:"-?\d+(\/\d+)?"/g, () => `:"${digits(i++)}/${digits(i++)}1"`);
			}
		],
		['a bound it does not prove', () => sound.replaceAll(/"(dual)":\{/g, '"$1":{"0,0|9,9":"1",')]
	])('by %s proves nothing', async (_, text) => {
		const start = performance.now();
		const read = await readCertificate(world.as.member, claim, text()).catch(
			(error: unknown) => error
		);
		expect(performance.now() - start).toBeLessThan(SOON_MS);
		const proves = read instanceof Error ? false : (read as { accepted: boolean }).accepted;
		expect(proves).toBe(false);
	});
});
