import { and, eq, isNotNull } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { SOLVER } from '../../src/lib/nonlocality/quantities/solver-version';
import { earlierResults, recomputations, results } from '../../src/lib/server/db/schema';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { takeNext } from '../../src/lib/server/jobs/lease';
import { startRunner } from '../../src/lib/server/jobs/runner';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { renewStations } from '../../src/lib/server/services/recomputations/renew-stations';
import {
	bibtexOf,
	claimFields,
	openServiceWorld,
	silent,
	type ServiceWorld
} from '../support/service';

const EARLIER = 'merestone 0.0.1';

let world: ServiceWorld;
let number: number;
beforeAll(async () => {
	world = await openServiceWorld();
	({ number } = await enterClaim(world.as.member, claimFields()));
	await world.recompute();
});
afterAll(() => world.close());

const stations = () =>
	world.db.read.select().from(recomputations).where(isNotNull(recomputations.station));

/** As an earlier solver left them. */
async function makeEarlier() {
	for (const { id, summary } of await stations()) {
		if (!summary) continue;
		const older = { solver: EARLIER, summary: { ...summary, solver: EARLIER } };
		await world.db.write((tx) =>
			tx.update(recomputations).set(older).where(eq(recomputations.id, id))
		);
	}
}

describe('stations of an earlier solver', () => {
	it('are queued once, last of all, and stand meanwhile', async () => {
		expect(await renewStations(world.db)).toBe(0);
		const before = await showClaim(world.as.member, number);
		await makeEarlier();
		const count = (await stations()).length;
		expect(count).toBe(8);
		expect(await renewStations(world.db)).toBe(count);
		expect(await renewStations(world.db)).toBe(0);
		// What is queued of them is not what a reader waits for.
		const during = await showClaim(world.as.member, number);
		expect(during.verdict).toEqual(before.verdict);
		expect(during.stations).toEqual(before.stations);
		expect(during.recomputations.map(({ progress }) => progress.state)).not.toContain('queued');
		// A new claim of another group comes first, all of it.
		const other = { family: 'i3322', printed: '0.2509', bibtex: bibtexOf(2) };
		const asked = await enterClaim(world.outsider, claimFields(other));
		const waiting = await world.db.read
			.select({ id: recomputations.id })
			.from(recomputations)
			.where(and(eq(recomputations.state, 'queued'), eq(recomputations.renewal, false)));
		const served = new Map<string, number>();
		for (let i = 0; i < waiting.length; i++) {
			const lease = await takeNext(world.db, new Date(), served);
			expect(waiting.map(({ id }) => id)).toContain(lease?.id);
		}
		const last = await takeNext(world.db, new Date(), served);
		expect((await stations()).find(({ id }) => id === last?.id)?.renewal).toBe(true);
		expect(asked.number).toBe(1);
	});

	it('keep what was proved: the best of all counts, and the earlier result is kept whole', async () => {
		// The newer solver's proofs are made looser than what stands: level 1 by 1/8 on each side.
		const honest = createInProcessPool();
		await world.db.write((tx) =>
			tx
				.update(recomputations)
				.set({ state: 'queued', leaseToken: null })
				.where(eq(recomputations.state, 'running'))
		);
		const runner = startRunner({
			db: world.db,
			log: silent,
			now: () => new Date(),
			pollMs: 60_000,
			pool: {
				...honest,
				async solve(problem, options) {
					const solved = await honest.solve(problem, options);
					const { check } = solved;
					if (!check?.checked || problem.quantity === 'local') return solved;
					const looser = {
						lower: check.lower === null ? null : check.lower - 1 / 8,
						upper: check.upper === null ? null : check.upper + 1 / 8,
						exact: null
					};
					return { ...solved, check: { ...check, ...looser } };
				}
			}
		});
		const before = await showClaim(world.as.member, number);
		await runner.idle();
		await runner.stop();
		const after = await showClaim(world.as.member, number);
		expect(after.verdict.status).toBe('agreement');
		expect(after.verdict.enclosure).toEqual(before.verdict.enclosure);
		expect(after.stations).toEqual(before.stations);
		const chsh = (await stations()).filter(({ summary }) => summary?.solver === SOLVER);
		expect(chsh.every(({ renewal, solver }) => !renewal && solver === SOLVER)).toBe(true);
		const kept = await world.db.read.select().from(earlierResults);
		expect(kept.map(({ solver }) => solver)).toEqual(kept.map(() => EARLIER));
		expect(kept).toHaveLength(8);
		for (const { recomputationId, result } of kept) {
			const [present] = await world.db.read
				.select()
				.from(results)
				.where(eq(results.recomputationId, recomputationId));
			expect(result.problem).toEqual(present?.result.problem);
		}
		expect(await renewStations(world.db)).toBe(0);
	}, 120_000);
});
