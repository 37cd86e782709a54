import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { closeSolverPool, setSolverPool } from '../../src/lib/server/jobs/current-pool';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim, type ClaimRow } from '../../src/lib/server/services/claims/find-claim';
import { readCertificate } from '../../src/lib/server/services/submissions/read-certificate';
import { CH, TSIRELSON, sidesOf, solved } from '../support/certificates';
import { asJson, changedAt, pathsOf, valueAt, type Json, type Path } from '../support/changed-json';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
/** On CHSH: its local, quantum and no-signalling maxima are 2, 2 sqrt 2 and 4. */
let claim: ClaimRow;
beforeAll(async () => {
	world = await openServiceWorld();
	setSolverPool(createInProcessPool());
	const { member } = world.as;
	const { number } = await enterClaim(member, claimFields());
	claim = await findClaim(world.db.read, member, number);
});
afterAll(async () => {
	await closeSolverPool();
	world.close();
});

const read = (text: string) => readCertificate(world.as.member, claim, text);

/** Every place where a number or a fraction stands. */
const numberPlaces = (value: Json): Path[] =>
	pathsOf(value).filter((path) => {
		const entry = valueAt(value, path);
		return (
			typeof entry === 'number' || (typeof entry === 'string' && /^-?\d+(\/\d+)?$/.test(entry))
		);
	});

const moved = (how: number) => (old: Json) =>
	typeof old === 'string'
		? String(Number.parseInt(old, 10) + Math.round(how * 10))
		: Number(old) + (Number.isInteger(old) && Math.abs(Number(old)) > 1000 ? how * 1e10 : how);

describe('a changed certificate', () => {
	it.each([
		['level 1 of CHSH', { ...CH, quantity: 'npa', level: 1 }, TSIRELSON],
		['a strategy for CHSH', { ...CH, quantity: 'see-saw', dimension: 2 }, TSIRELSON],
		['the local maximum', { ...CH, quantity: 'local' }, 2],
		['the no-signalling maximum', { ...CH, quantity: 'no-signalling' }, 4]
	] as const)('of %s is refused, or what it proves is still true', async (_, problem, truth) => {
		const whole: Record<string, unknown> = JSON.parse(await solved(problem));
		const sound = asJson(whole['certificate']);
		const places = numberPlaces(sound);
		expect(places.length).toBeGreaterThan(3);
		let refused = 0;
		// Small enough to stay a certificate, or large enough to be none; both directions.
		for (const [i, path] of places.entries()) {
			const how = [0.3, -0.3, 1e-3, -2][i % 4] ?? 1;
			const certificate = changedAt(sound, path, moved(how));
			const text = JSON.stringify({ ...whole, certificate });
			const result = await read(text).catch((error: unknown) => {
				expect(error).toMatchObject({ code: 'invalid' });
				return null;
			});
			if (!result?.accepted) {
				refused++;
				continue;
			}
			const { lower, upper } = sidesOf(result.finding);
			if (lower !== null) expect(lower).toBeLessThanOrEqual(truth);
			if (upper !== null) expect(upper).toBeGreaterThanOrEqual(truth);
		}
		expect(refused).toBeGreaterThan(0);
	});

	it('gains nothing from what its person prints', async () => {
		const whole = JSON.parse(await solved({ ...CH, quantity: 'npa', level: 1 }));
		const looser = JSON.stringify({ ...whole, upper: 0.9, optimum: 7, method: { level: 'faith' } });
		const { finding, accepted } = await read(looser);
		expect(accepted).toBe(true);
		expect(finding.result).toMatchObject({ value: null, optimum: null, method: {} });
		expect(sidesOf(finding).upper).toBeLessThan(TSIRELSON + 1e-6);
		const tighter = await read(JSON.stringify({ ...whole, upper: 0.2 }));
		expect(tighter).toMatchObject({ accepted: false });
		expect(tighter.note).toMatch(/^The check refuses it: the printed upper side 0\.2 is below/);
	});
});
