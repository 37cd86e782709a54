/**
 * Fills an empty database with the demo group through the service verbs, runs the solvers until
 * the queue is empty, then writes the marker file named on the command line.
 */
import { inArray } from 'drizzle-orm';
import { writeFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { claimInput } from '../src/lib/schemas/claim-input';
import { config } from '../src/lib/server/config';
import type { Context, GroupContext, UserContext } from '../src/lib/server/context';
import { openDatabase } from '../src/lib/server/db/client';
import { recomputations } from '../src/lib/server/db/schema';
import { setSolverPool } from '../src/lib/server/jobs/current-pool';
import { createThreadPool } from '../src/lib/server/jobs/pool';
import { startRunner } from '../src/lib/server/jobs/runner';
import { log } from '../src/lib/server/log';
import { closeReferences } from '../src/lib/server/references/read-reference';
import { enterClaim } from '../src/lib/server/services/claims/enter-claim';
import { proposeClaim } from '../src/lib/server/services/claims/propose-claim';
import { publishClaim } from '../src/lib/server/services/claims/publish-claim';
import { supersedeClaim } from '../src/lib/server/services/claims/supersede-claim';
import { withdrawClaim } from '../src/lib/server/services/claims/withdraw-claim';
import { groupContext } from '../src/lib/server/services/groups/group-context';
import { startGroup } from '../src/lib/server/services/groups/start-group';
import { acceptInvitation } from '../src/lib/server/services/invitations/accept-invitation';
import { createInvitation } from '../src/lib/server/services/invitations/create-invitation';
import { signUp } from '../src/lib/server/services/users/sign-up';
import { CLAIMS } from './claims';
import type { SeedClaim } from './claims/seed-claim';
import { PAPERS } from './papers';
import { DEMO_PASSWORD, GROUP, PEOPLE, type Person } from './people';
import { tellPublication } from './story/publication';
import { storyClock } from './story/story-clock';
import { tellTalk } from './story/talk';
import { tellTasks } from './story/tasks';

type People = Readonly<Record<Person['key'], GroupContext>>;

async function makePeople(ctx: Context): Promise<People> {
	const signedUp = new Map<Person['key'], UserContext>();
	for (const { key, name, email } of PEOPLE) {
		const actor = await signUp(ctx, { name, email, password: DEMO_PASSWORD }, null);
		signedUp.set(key, { ...ctx, actor });
	}
	const of = (key: Person['key']): UserContext => {
		const person = signedUp.get(key);
		if (!person) throw new Error(`The seed has no ${key}.`);
		return person;
	};
	await startGroup(of('owner'), GROUP);
	const owner = await inGroup(of('owner'));
	for (const { key, role } of PEOPLE) {
		if (key === 'owner') continue;
		const { link } = await createInvitation(owner, { role });
		await acceptInvitation(of(key), link.slice(link.lastIndexOf('/') + 1));
	}
	return {
		owner,
		maintainer: await inGroup(of('maintainer')),
		member: await inGroup(of('member')),
		observer: await inGroup(of('observer'))
	};
}

async function inGroup(ctx: UserContext): Promise<GroupContext> {
	const found = await groupContext(ctx, { slug: GROUP.slug });
	if (!found) throw new Error('The seed could not enter its own group.');
	return found;
}

async function enter(people: People, claim: SeedClaim): Promise<number> {
	const input = claimInput.parse({
		paper: 'bibtex',
		bibtex: PAPERS[claim.paper],
		...claim.input
	});
	const { number } = await enterClaim(people[claim.by], input);
	if (claim.then === 'publish') await publishClaim(people.maintainer, number);
	if (claim.then === 'propose') await proposeClaim(people[claim.by], number);
	if (claim.then === 'withdraw') await withdrawClaim(people.maintainer, number);
	return number;
}

async function seed(marker: string): Promise<void> {
	const { db, close } = await openDatabase(config().databaseUrl);
	const clock = storyClock();
	const ctx: Context = { db, actor: null, requestId: 'seed', now: clock.now };
	clock.set(21);
	const people = await makePeople(ctx);

	const pool = createThreadPool(cpus().length);
	setSolverPool(pool);
	const numbers = new Map<string, number>();
	for (const [place, claim] of CLAIMS.entries()) {
		clock.set(15, 14 + place / 20);
		if (!claim.leaveQueued) numbers.set(claim.key, await enter(people, claim));
	}
	clock.set(15, 17);
	for (const claim of CLAIMS) {
		const number = numbers.get(claim.key);
		const by = numbers.get(claim.supersededBy ?? '');
		if (number !== undefined && by !== undefined) {
			await supersedeClaim(people.maintainer, number, by);
		}
	}
	console.log(`  ${numbers.size} claims entered; recomputing ...`);

	const runner = startRunner({ db, pool, log: log(), now: ctx.now });
	await runner.idle();
	await runner.stop();
	const left = await db.read.$count(
		recomputations,
		inArray(recomputations.state, ['queued', 'running'])
	);
	if (left > 0) {
		throw new Error(`${left} recomputations did not run: build the solver thread (npm run build).`);
	}

	console.log('  two weeks of tasks, comments and publications ...');
	const story = { people, numbers, clock };
	await tellPublication(story, ctx);
	await tellTasks(story);
	await tellTalk(story);

	clock.setToNow();
	for (const claim of CLAIMS) {
		if (claim.leaveQueued) await enter(people, claim);
	}
	await Promise.all([closeReferences(), pool.close()]);
	close();
	// The demo's server learns from it who looks after the site.
	writeFileSync(marker, `${people.owner.actor.id}\n`);
}

const marker = process.argv[2];
if (!marker) throw new Error('usage: tsx seed/seed.ts MARKER_FILE');
if (!config().demo) throw new Error('The seed fills demo databases only: set MERESTONE_DEMO=1.');
await seed(marker);
