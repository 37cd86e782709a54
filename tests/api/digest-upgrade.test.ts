import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { DIGEST_VERSION } from '../../src/lib/nonlocality/scenario/equivalence';
import { claims, comments, inequalities, recomputations } from '../../src/lib/server/db/schema';
import { addComment } from '../../src/lib/server/services/comments/add-comment';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import {
	movedForGroup,
	movedForPublic
} from '../../src/lib/server/services/inequalities/moved-inequality';
import { showInequality } from '../../src/lib/server/services/inequalities/show-inequality';
import { upgradeDigests } from '../../src/lib/server/services/inequalities/upgrade-digests';
import { readClaim } from '../../src/lib/server/services/readings/read-claim';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

/** Tilted CHSH with alpha = 1: local 3, quantum sqrt(8 + 2) (Acín, Massar and Pironio 2012), no-signalling 4. */
const FIRST = 'A0 + A0 B0 + A0 B1 + A1 B0 - A1 B1';
/** The same with its parties exchanged, inputs exchanged, doubled, and 5 added: 11, 5 + 2 sqrt(10), 13. */
const SECOND = '2 B1 + 2 A0 B1 + 2 A1 B1 + 2 A0 B0 - 2 A1 B0 + 5';

let world: ServiceWorld;
beforeAll(async () => {
	world = await openServiceWorld();
});
afterAll(() => world.close());

/** As a weaker digest of an earlier version left it: under a digest of its own. */
async function makeOlder(id: string, digest: string) {
	await world.db.write((tx) =>
		tx.update(inequalities).set({ digest, digestVersion: 0 }).where(eq(inequalities.id, id))
	);
}

let papers = 0;
async function claimOn(expression: string, quantity: 'local' | 'quantum', printed: string) {
	papers++;
	const fields = { subjectKind: 'expression', expression, quantity, printed } as const;
	const input = claimFields({ ...fields, bibtex: bibtexOf(papers) });
	const { number } = await enterClaim(world.as.member, input);
	const { inequalityId } = await findClaim(world.db.read, world.as.member, number);
	return { number, inequalityId: inequalityId ?? '' };
}

describe('a better digest', () => {
	it('merges what it finds to be one inequality; every claim keeps its meaning', async () => {
		const { member, observer } = world.as;
		const first = await claimOn(FIRST, 'quantum', '3.1623');
		await makeOlder(first.inequalityId, 'an older digest');
		const second = await claimOn(SECOND, 'quantum', '11.3246');
		expect(second.inequalityId).not.toBe(first.inequalityId);
		const third = await claimOn(SECOND, 'local', '12');
		expect(third.inequalityId).toBe(second.inequalityId);
		const picked = claimFields({ subjectKind: 'known', inequalityId: second.inequalityId });
		const fourth = await enterClaim(member, {
			...picked,
			printed: '13',
			quantity: 'no-signalling'
		});
		await world.recompute();
		await addComment(member, {
			subject: 'inequality',
			subjectId: second.inequalityId,
			body: 'Seen elsewhere.'
		});
		await makeOlder(second.inequalityId, 'another older digest');
		const before = await Promise.all(
			[first, second, third, fourth].map(({ number }) => showClaim(member, number))
		);
		expect(before.map(({ verdict }) => verdict.status)).toEqual([
			'agreement',
			'agreement',
			'discrepancy',
			'agreement'
		]);

		const upgrade = await upgradeDigests(world.db, () => new Date());
		expect(upgrade).toEqual({ upgraded: 1, merged: 1, failed: {} });
		const [row] = await world.db.read
			.select()
			.from(inequalities)
			.where(eq(inequalities.id, first.inequalityId));
		expect(row?.digestVersion).toBe(DIGEST_VERSION);
		const gone = eq(inequalities.id, second.inequalityId);
		expect(await world.db.read.$count(inequalities, gone)).toBe(0);

		for (const [i, { number }] of [first, second, third, fourth].entries()) {
			const { verdict, subject } = await showClaim(member, number);
			expect(subject.inequalityId).toBe(first.inequalityId);
			expect(verdict.status).toBe(before[i]?.verdict.status);
			// 2 sqrt(10) + 5 = 11.3245553 is within what was proved, on either row.
			const [known, found] = [before[i]?.verdict.enclosure, verdict.enclosure];
			expect(Number(found?.lower)).toBeCloseTo(Number(known?.lower), 6);
			expect(Number(found?.upper)).toBeCloseTo(Number(known?.upper), 6);
		}
		const moved = await findClaim(world.db.read, member, second.number);
		expect(moved).toMatchObject({ scale: '2', shift: '5' });

		// Nothing of the old row is left, and one run answers for each station.
		const about = eq(recomputations.inequalityId, second.inequalityId);
		expect(await world.db.read.$count(recomputations, about)).toBe(0);
		const runs = await world.db.read
			.select({ station: recomputations.station, checked: recomputations.checked })
			.from(recomputations)
			.where(eq(recomputations.inequalityId, first.inequalityId));
		const stations = runs.flatMap(({ station }) => station ?? []);
		expect(new Set(stations).size).toBe(stations.length);
		const talk = await world.db.read.select().from(comments);
		expect(talk.map(({ subjectId }) => subjectId)).toEqual([first.inequalityId]);

		// The old address leads on for those who may see the kept one, and for nobody else.
		expect(await movedForGroup(observer, second.inequalityId)).toBe(first.inequalityId);
		expect(await movedForGroup(world.outsider, second.inequalityId)).toBeNull();
		expect(await movedForPublic(world.anonymous, second.inequalityId)).toBeNull();
		const page = await showInequality(observer, first.inequalityId);
		expect(page.stations).toMatchObject({ local: '3', noSignalling: '4' });
		expect(page.claimRows).toHaveLength(4);
		// Every claim's own normalisation, told into the page's, and a switch to it.
		const [as] = page.claimNormalisations.filter(({ printed }) => printed === '11.3246');
		expect(as).toMatchObject({ map: '2 × it + 5', here: '= 3.162275 … 3.162325' });
		const switched = await showInequality(observer, first.inequalityId, as?.key);
		expect(switched.stations).toMatchObject({ local: '11', noSignalling: '13' });
		expect(switched.normalisation.label).toContain('As in Arden');
		const others = switched.claimNormalisations.map(({ map }) => map);
		expect(others.filter((map) => map === '1/2 × it − 5/2')).toHaveLength(1);
		expect(others.filter((map) => map === null)).toHaveLength(3);
	}, 120_000);

	it('leaves a claim that picked the merged one as it was, also when it is read again', async () => {
		const [old] = await world.db.read
			.select({ input: claims.input })
			.from(claims)
			.where(eq(claims.printed, '13'));
		const reading = await readClaim(world.as.member, old?.input ?? {});
		expect(reading.issues).toEqual([]);
		expect(reading.knownAs?.map).toBe('2 × it + 5');
		expect(reading.stations).toMatchObject({ local: '11', noSignalling: '13' });
	});

	it('does nothing the second time', async () => {
		const again = await upgradeDigests(world.db, () => new Date());
		expect(again).toEqual({ upgraded: 0, merged: 0, failed: {} });
	});
});
