import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { parseSdpa } from '../../src/lib/nonlocality/optimization/sdpa-text';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { inequalitySdpa } from '../../src/lib/server/services/inequalities/inequality-sdpa';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
let id: string;
beforeAll(async () => {
	world = await openServiceWorld();
	const expression = 'A0 B0 + A0 B1 + A1 B0 - A1 B1 + 1/3 A0';
	const fields = claimFields({ subjectKind: 'expression', expression, printed: '3.1' });
	const { number } = await enterClaim(world.as.member, fields);
	id = (await findClaim(world.db.read, world.as.member, number)).inequalityId ?? '';
});
afterAll(() => world.close());

describe('the programme of an inequality', () => {
	// Two inputs a side: 1 and four projectors; 1+AB has four products more. Each free moment
	// (10, and 16 at 1+AB) is one variable; P >= 0 adds a row for each of the sixteen probabilities.
	it.each([
		[{}, [5], 10],
		[{ level: '1+AB' }, [9], 16],
		[{ level: '1', nonNegative: 'on' }, [5, -16], 10]
	])('is printed for %j', async (query, blocks, moments) => {
		const { name, text } = await inequalitySdpa(world.as.observer, id, query);
		expect(name).toMatch(/^merestone-[\w+-]+\.dat-s$/);
		const programme = parseSdpa(text);
		expect(programme.blocks).toEqual(blocks);
		expect(programme.objective).toHaveLength(moments);
	});

	it('is refused where it is not for the asker, and where the level is none', async () => {
		await expect(inequalitySdpa(world.anonymous, id, {})).rejects.toThrow('no such inequality');
		await expect(inequalitySdpa(world.outsider, id, {})).rejects.toThrow('no such inequality');
		const { observer } = world.as;
		await expect(inequalitySdpa(observer, id, { level: '0' })).rejects.toThrow('level');
		await expect(inequalitySdpa(observer, 'none', {})).rejects.toThrow('no such inequality');
	});
});
