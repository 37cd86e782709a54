import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Problem, Result } from '../../src/lib/nonlocality/problem';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { recomputations, results } from '../../src/lib/server/db/schema';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import {
	LEASE_MS,
	MOST_ATTEMPTS,
	extendLease,
	giveBack,
	reap,
	takeNext
} from '../../src/lib/server/jobs/lease';
import { finishRun } from '../../src/lib/server/jobs/finish-run';
import { SolverKilled, type SolverPool } from '../../src/lib/server/jobs/pool';
import { startRunner } from '../../src/lib/server/jobs/runner';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { recomputeClaim } from '../../src/lib/server/services/claims/recompute-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { cancelRecomputation } from '../../src/lib/server/services/recomputations/cancel-recomputation';
import {
	queueRecomputation,
	requeue
} from '../../src/lib/server/services/recomputations/queue-recomputation';
import { stationProblems } from '../../src/lib/server/services/recomputations/station-problems';
import {
	bibtexOf,
	claimFields,
	openServiceWorld,
	silent,
	type ServiceWorld
} from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

const CHSH: Problem['terms'] = [0, 1].flatMap((x) =>
	[0, 1].flatMap((y) =>
		[0, 1].flatMap((a) =>
			[0, 1].map(
				(b) =>
					[
						(a + b + x * y) % 2 === 0 ? '1' : '-1',
						[
							[0, x, a],
							[1, y, b]
						]
					] as const
			)
		)
	)
);
const SUBJECT = {
	outputs: [
		[2, 2],
		[2, 2]
	],
	terms: CHSH
};

/** CHSH's local maximum with a seed of its own, so that each is another problem. */
function localProblem(seed: number): Problem {
	const [first] = stationProblems(SUBJECT, 60);
	if (!first) throw new Error('no stations');
	return { ...first.problem, seed };
}

async function queue(seed: number, groupId: string): Promise<string> {
	const queued = { problem: localProblem(seed), inequalityId: null, groupId };
	return world.db.write((tx) => queueRecomputation(tx, queued, new Date()));
}

async function stateOf(id: string) {
	const [row] = await world.db.read.select().from(recomputations).where(eq(recomputations.id, id));
	if (!row) throw new Error('gone');
	return row;
}

const later = (ms: number) => new Date(Date.now() + ms);

describe('the queue', () => {
	it('runs the same problem once, however often it is asked for', async () => {
		const groupId = world.as.owner.group.id;
		expect(await queue(1, groupId)).toBe(await queue(1, groupId));
		expect(await queue(2, groupId)).not.toBe(await queue(1, groupId));
	});

	it('gives each job to one of many that ask at the same time', async () => {
		const groupId = world.as.owner.group.id;
		for (let i = 0; i < 10; i++) await queue(i, groupId);
		const served = new Map<string, number>();
		const taken = await Promise.all(
			Array.from({ length: 20 }, () => takeNext(world.db, new Date(), served))
		);
		const ids = taken.flatMap((lease) => lease?.id ?? []);
		expect(ids).toHaveLength(10);
		expect(new Set(ids).size).toBe(10);
	});

	it('lets groups take turns', async () => {
		const [a, b] = [world.as.owner.group.id, world.outsider.group.id];
		for (let i = 0; i < 20; i++) await queue(i, a);
		const only = await queue(99, b);
		const served = new Map<string, number>();
		const order = [];
		for (let i = 0; i < 3; i++) order.push((await takeNext(world.db, new Date(), served))?.id);
		expect(order.slice(0, 2)).toContain(only);
	});

	it('runs what is instant first, then what claims ask for, then the other stations', async () => {
		const { member } = world.as;
		await enterClaim(member, claimFields({ family: 'i3322', printed: '0.2509' }));
		const later = claimFields({ quantity: 'npa', level: '2', bibtex: bibtexOf(2) });
		const { number } = await enterClaim(member, later);
		expect((await showClaim(member, number)).progress).toMatchObject({ ahead: 5 });
		const other = await queue(1, world.outsider.group.id);
		expect((await showClaim(member, number)).progress).toMatchObject({ ahead: 6 });
		const page = await listClaims(member, parseLedgerQuery(new URLSearchParams('sort=number')));
		expect(page.rows.map(({ progress }) => progress?.ahead)).toEqual([5, 6]);

		const served = new Map<string, number>();
		const stations: string[] = [];
		for (;;) {
			const lease = await takeNext(world.db, new Date(), served);
			if (!lease) break;
			if (lease.id !== other) stations.push((await stateOf(lease.id)).station ?? 'claim');
		}
		expect(stations.slice(0, 6)).toEqual([
			'local',
			'no-signalling',
			'local',
			'no-signalling',
			'claim',
			'npa-2'
		]);
		expect(stations.slice(6)).not.toContain('local');
		expect(stations).toHaveLength(17);
	});

	it('takes back what a dead runner held, and drops what it still says', async () => {
		const id = await queue(1, world.as.owner.group.id);
		const dead = await takeNext(world.db, new Date(), new Map());
		if (!dead) throw new Error('nothing taken');
		expect(await world.db.write((tx) => reap(tx, new Date(), false))).toEqual([]);
		expect((await stateOf(id)).state).toBe('running');
		await world.db.write((tx) => reap(tx, later(LEASE_MS + 1), false));
		expect((await stateOf(id)).state).toBe('queued');
		const alive = await takeNext(world.db, new Date(), new Map());
		expect(alive?.attempts).toBe(2);
		expect(await extendLease(world.db, dead, new Date(), null)).toBe(false);
		const late = { kind: 'failed', reason: 'too late' } as const;
		const dropped = { db: world.db, log: silent, lease: dead, outcome: late, now: new Date() };
		expect(await finishRun(dropped)).toBe(false);
		expect((await stateOf(id)).state).toBe('running');
	});

	it('gives up a job that brings the process down each time', async () => {
		const id = await queue(1, world.as.owner.group.id);
		for (let i = 0; i < MOST_ATTEMPTS; i++) {
			await takeNext(world.db, new Date(), new Map());
			await world.db.write((tx) => reap(tx, new Date(), true));
		}
		expect(await stateOf(id)).toMatchObject({
			state: 'failed',
			reason: 'the server stopped 3 times while it ran'
		});
	});

	it('does not count an orderly stop as an attempt', async () => {
		const id = await queue(1, world.as.owner.group.id);
		const lease = await takeNext(world.db, new Date(), new Map());
		if (lease) await giveBack(world.db, lease);
		expect(await stateOf(id)).toMatchObject({ state: 'queued', attempts: 0, leaseToken: null });
	});
});

/** A pool whose solver does what the test says. */
const poolThat = (solve: SolverPool['solve']): SolverPool => ({ ...createInProcessPool(), solve });

const runner = (pool: SolverPool, log = silent) =>
	startRunner({ db: world.db, pool, log, now: () => new Date(), pollMs: 20 });

/** Waits for the table to say so; the runner looks at it 50 times a second. */
async function until(id: string, state: string): Promise<void> {
	for (let i = 0; i < 500 && (await stateOf(id)).state !== state; i++) {
		await new Promise((resolve) => setTimeout(resolve, 20));
	}
	expect((await stateOf(id)).state).toBe(state);
}

const whenAborted = (signal: AbortSignal | undefined) =>
	new Promise<never>((_, reject) =>
		signal?.addEventListener('abort', () => reject(new SolverKilled('cancelled')))
	);

describe('the runner', () => {
	it('never takes a refused certificate for evidence, and raises the alarm', async () => {
		const honest = createInProcessPool();
		const lying = poolThat(async (problem, options) => {
			const { result } = await honest.solve(problem, options);
			if (result.status !== 'done') return { result, check: null };
			// One unit more than the strategy or the box in the certificate reaches.
			const more = (side: number | null) => (side === null ? null : side + 1);
			const forged: Result = {
				...result,
				lower: more(result.lower),
				upper: more(result.upper),
				value: null,
				exact: null
			};
			return { result: forged, check: await honest.verify(forged) };
		});
		const { number } = await enterClaim(
			world.as.member,
			claimFields({ quantity: 'local', printed: '3' })
		);
		const alarms: unknown[] = [];
		const running = runner(lying, {
			...silent,
			error: (...words: unknown[]) => alarms.push(words)
		});
		await running.idle();
		await running.stop();
		const claim = await showClaim(world.as.observer, number);
		expect(claim.verdict).toMatchObject({ status: 'open', reasonCode: 'failed' });
		expect(claim.recomputations.some(({ checked }) => checked === false)).toBe(true);
		expect(claim.recomputations.every(({ checked }) => checked !== true)).toBe(true);
		expect(JSON.stringify(alarms)).toContain('ALARM');
	});

	it('keeps the certificate apart from the queue, and a proof when a later run is refused', async () => {
		const id = await queue(1, world.as.owner.group.id);
		await world.recompute();
		const proved = await stateOf(id);
		expect(proved).toMatchObject({ state: 'done', checked: true, exact: '2' });
		expect(proved.summary).not.toHaveProperty('problem');
		expect(proved.summary?.certificate).toEqual({ kind: 'deterministic-strategy' });
		const whole = async () =>
			world.db.read.select().from(results).where(eq(results.recomputationId, id));
		const [stored] = await whole();
		expect(stored?.result).toMatchObject({ problem: proved.problem, status: 'done' });

		await world.db.write((tx) => requeue(tx, id, null));
		const honest = createInProcessPool();
		const refused = runner(
			poolThat(async (problem, options) => ({
				...(await honest.solve(problem, options)),
				check: { checked: false, reason: 'forged' }
			}))
		);
		await refused.idle();
		await refused.stop();
		expect(await stateOf(id)).toMatchObject({ state: 'done', checked: true, exact: '2' });
		expect(await whole()).toEqual([stored]);
	});

	it('tries a crashed thread again, then says so', async () => {
		const id = await queue(1, world.as.owner.group.id);
		let runs = 0;
		const running = runner(
			poolThat(async () => {
				runs++;
				throw new Error('the thread is gone');
			})
		);
		for (let i = 0; i < 200 && (await stateOf(id)).notBefore === null; i++) {
			await new Promise((resolve) => setTimeout(resolve, 20));
		}
		const pause = (await stateOf(id)).notBefore?.getTime() ?? 0;
		expect(pause).toBeGreaterThan(Date.now());
		for (let i = 0; i < 200 && runs < MOST_ATTEMPTS; i++) {
			// The pause before the next attempt is over.
			await world.db.write((tx) => tx.update(recomputations).set({ notBefore: null }));
			await new Promise((resolve) => setTimeout(resolve, 20));
		}
		await until(id, 'failed');
		await running.stop();
		expect(runs).toBe(MOST_ATTEMPTS);
		expect((await stateOf(id)).reason).toContain('3 times in a row');
	});

	it('puts what runs back into the queue when it is stopped', async () => {
		const id = await queue(1, world.as.owner.group.id);
		const running = runner(poolThat(async (_, { signal } = {}) => whenAborted(signal)));
		await until(id, 'running');
		await running.stop();
		expect(await stateOf(id)).toMatchObject({ state: 'queued', attempts: 0 });
	});

	it('stops what is cancelled; it can be asked for again', async () => {
		const { number } = await enterClaim(
			world.as.member,
			claimFields({
				subjectKind: 'family',
				family: 'cglmp',
				familyParameter: '3',
				printed: '2.9149'
			})
		);
		const stuck = runner(poolThat(async (_, { signal } = {}) => whenAborted(signal)));
		const [first] = (await showClaim(world.as.member, number)).recomputations;
		if (!first) throw new Error('nothing queued');
		await until(first.id, 'running');
		await cancelRecomputation(world.as.member, first.id);
		await until(first.id, 'cancelled');
		await stuck.stop();
		await expect(cancelRecomputation(world.outsider, first.id)).rejects.toMatchObject({
			code: 'not-found'
		});
		await recomputeClaim(world.as.member, number);
		expect((await stateOf(first.id)).state).toBe('queued');
	});
});
