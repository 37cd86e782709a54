import { isNotNull } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { recomputations } from '../../src/lib/server/db/schema';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { queueStations } from '../../src/lib/server/services/inequalities/find-or-create-inequality';
import { findInequality } from '../../src/lib/server/services/inequalities/inequality-rows';
import { loadStations } from '../../src/lib/server/services/inequalities/stations-view';
import { readClaim } from '../../src/lib/server/services/readings/read-claim';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

const stationIds = async () =>
	(
		await world.db.read
			.select({ id: recomputations.id })
			.from(recomputations)
			.where(isNotNull(recomputations.station))
	).map(({ id }) => id);

describe('stations', () => {
	it('are run once for an inequality, also under a later budget', async () => {
		const first = await enterClaim(world.as.member, claimFields());
		await world.recompute();
		const before = await stationIds();
		const second = await enterClaim(
			world.as.member,
			claimFields({ printed: '2.83', bibtex: bibtexOf(2) })
		);
		const id = (await showClaim(world.as.member, first.number)).subject.inequalityId ?? '';
		const row = await findInequality(world.db.read, id);
		if (!row) throw new Error('no inequality');
		await world.db.write((tx) => queueStations(tx, row, null, 17, new Date()));
		expect((await stationIds()).sort()).toEqual(before.sort());
		const { stations, progress } = await showClaim(world.as.member, second.number);
		expect(stations?.complete).toBe(true);
		expect(progress?.state).toBe('done');
	});

	it('have what a claim asked for beside them, but no minimum', async () => {
		const npa = claimFields({ quantity: 'npa', level: '3', printed: '2.8284' });
		const { number } = await enterClaim(world.as.member, npa);
		const min = claimFields({ quantity: 'local', sense: 'min', printed: '-2' });
		const minimum = await enterClaim(world.as.member, min);
		await world.recompute();
		const claim = await showClaim(world.as.member, number);
		const id = claim.subject.inequalityId ?? '';
		const rows = (await loadStations(world.db.read, [id])).get(id) ?? [];
		const others = rows.filter(({ station }) => station === null);
		expect(others.map(({ quantity, level }) => [quantity, level])).toEqual([['npa', 3]]);
		expect(claim.stations?.local).toBe('2');
		const below = await showClaim(world.as.member, minimum.number);
		expect(below.verdict.status).toBe('agreement');
		expect(below.stations).toBeNull();
	});

	it('do not judge a level that has no value of the functional', async () => {
		const fields = claimFields({
			family: 'gyni',
			familyParameter: '3',
			quantity: 'npa',
			level: '1',
			printed: '0.9'
		});
		const reading = await readClaim(world.as.member, fields);
		expect(reading.recomputedBy).toMatch(/^Will be Open: level 1 has no moments of 3 parties/);
		const { number } = await enterClaim(world.as.member, fields);
		await world.recompute();
		const { verdict, stations } = await showClaim(world.as.member, number);
		expect(verdict).toMatchObject({ status: 'open', reasonCode: 'no-solver', enclosure: null });
		expect(verdict.reason).toContain('ask for level 2, or one operator per party');
		expect(stations).toMatchObject({ local: '0.25', noSignalling: '1/3' });
	});

	it('judge a later claim at once, after it was entered', async () => {
		await enterClaim(world.as.member, claimFields());
		await world.recompute();
		const later = claimFields({ printed: '2.9', bibtex: bibtexOf(2) });
		const { number } = await enterClaim(world.as.member, later);
		const { history } = await showClaim(world.as.member, number);
		expect(history.map(({ text }) => text)).toEqual(['Recomputed: Discrepancy', 'Entered']);
	});
});

describe('a reading', () => {
	it('names the bound written behind an expression and keeps it out of the functional', async () => {
		const expression = 'A1 B1 + A1 B2 + A2 B1 - A2 B2';
		const typed = { subjectKind: 'expression', printed: '' } as const;
		const alone = await readClaim(world.as.member, claimFields({ ...typed, expression }));
		const bounded = await readClaim(
			world.as.member,
			claimFields({ ...typed, expression: `${expression} \\leq 2` })
		);
		expect(bounded.besideIt).toEqual({ relation: '<=', text: '2' });
		expect({ ...bounded, besideIt: null }).toEqual({ ...alone, notation: bounded.notation });
		expect(alone.notation).toBe('Expression, in observables');
		expect(bounded.notation).toBe('Expression pasted as LaTeX, in observables');
	});
});
