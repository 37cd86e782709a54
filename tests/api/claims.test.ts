import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { supersedeClaim } from '../../src/lib/server/services/claims/supersede-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { claimFields, bibtexOf, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

const list = (query = '') =>
	listClaims(world.as.observer, parseLedgerQuery(new URLSearchParams(query)));

describe('a claim', () => {
	it('is Open until it is recomputed, then agrees with Tsirelson’s value', async () => {
		const { number } = await enterClaim(world.as.member, claimFields());
		const before = await showClaim(world.as.observer, number);
		expect(before.verdict).toMatchObject({ status: 'open', reasonCode: 'not-run' });
		expect(before.progress?.state).toBe('queued');
		await world.recompute();
		// Tsirelson 1980: 2 sqrt 2 = 2.8284271247...
		const after = await showClaim(world.as.observer, number);
		expect(after.verdict.status).toBe('agreement');
		expect(Number(after.verdict.enclosure?.lower)).toBeCloseTo(2 * Math.SQRT2, 6);
		expect(after.stations).toMatchObject({ local: '2', noSignalling: '4', complete: true });
		expect(after.recomputations.every(({ checked }) => checked)).toBe(true);
		expect(after.history.map(({ text }) => text)).toEqual(['Recomputed: Agreement', 'Entered']);
	});

	it('in other notations meets on one inequality, each in its own normalisation', async () => {
		const chsh = await enterClaim(world.as.member, claimFields());
		// CH of Clauser and Horne 1974, as a Collins-Gisin table: CHSH = 4 CH + 2.
		const ch = await enterClaim(
			world.as.member,
			claimFields({
				subjectKind: 'collins-gisin',
				table: '0 -1 0\n-1 1 1\n0 1 -1',
				printed: '0.2071',
				bibtex: bibtexOf(2)
			})
		);
		await world.recompute();
		const [a, b] = [
			await showClaim(world.as.observer, chsh.number),
			await showClaim(world.as.observer, ch.number)
		];
		expect(b.subject.inequalityId).toBe(a.subject.inequalityId);
		expect(b.subject.text).toBe('CHSH');
		expect(b.map).toEqual({ scale: '1/4', shift: '-1/2', name: 'CHSH' });
		expect(b.verdict.status).toBe('agreement');
		expect(b.stations).toMatchObject({ local: '0', noSignalling: '0.5' });
	});

	it('on a hybrid maximum is recomputed in the model it names', async () => {
		// Collins et al. 2002: Svetlichny's inequality has hybrid bound 4, quantum 4 sqrt 2
		const svetlichny = { family: 'svetlichny', familyParameter: '3', printed: '4' } as const;
		const claims = await Promise.all(
			(['hybrid', 'hybrid-no-signalling'] as const).map((quantity, i) =>
				enterClaim(
					world.as.member,
					claimFields({ ...svetlichny, quantity, bibtex: bibtexOf(20 + i) })
				)
			)
		);
		await world.recompute();
		for (const { number } of claims)
			expect((await showClaim(world.as.observer, number)).verdict).toMatchObject({
				status: 'agreement',
				enclosure: { worth: 'guaranteed', lower: '4', upper: '4' }
			});
	});

	it('that disagrees says why, and agrees once it is corrected', async () => {
		const { number } = await enterClaim(world.as.member, claimFields({ printed: '2.8248' }));
		await world.recompute();
		const wrong = await showClaim(world.as.observer, number);
		expect(wrong.verdict).toMatchObject({
			status: 'discrepancy',
			reasonCode: 'below-lower-bound'
		});
		expect(wrong.verdict.diagnosis[0]).toMatchObject({ kind: 'digits-swapped', value: '2.8284' });
		await editClaim(world.as.member, number, 1, claimFields());
		const right = await showClaim(world.as.observer, number);
		expect(right).toMatchObject({ version: 2, verdict: { status: 'agreement' } });
		expect(right.history.map(({ text }) => text)).toContain('Value changed from 2.8248 to 2.8284');
	});

	it('on a sum of correlators that has no name may have meant the game’s winning probability', async () => {
		// CHSH and, on a pair of their own, A2 B2: at most 2 sqrt 2 + 1 (Cirel'son, Lett. Math. Phys.
		// 4, 93 (1980)), so that the game of five questions is won with 1/2 + 3.8284/10 = 0.88284.
		const expression = 'A0 B0 + A0 B1 + A1 B0 - A1 B1 + A2 B2';
		const fields = { subjectKind: 'expression', family: '', expression } as const;
		const { number } = await enterClaim(
			world.as.member,
			claimFields({ ...fields, printed: '0.88284' })
		);
		await world.recompute();
		const { verdict } = await showClaim(world.as.observer, number);
		expect(verdict.status).toBe('discrepancy');
		expect(verdict.diagnosis.map(({ kind, value, scale }) => [kind, value, scale])).toContainEqual([
			'other-normalisation',
			'0.88284',
			'1/10'
		]);
	});

	it('on an expression may have meant the other index base, where that changes the value', async () => {
		// P(a below 2) is 1 for the input with two outputs, and can be 0 for the one with three.
		const { number } = await enterClaim(
			world.as.member,
			claimFields({
				subjectKind: 'expression',
				expression: 'P(0,0|1,1) + P(1,0|1,1) + P(0,1|1,1) + P(1,1|1,1)',
				outputs: '2 3 / 2 2',
				indexBase: '0',
				quantity: 'local',
				sense: 'min',
				printed: '1'
			})
		);
		await world.recompute();
		const { verdict } = await showClaim(world.as.observer, number);
		expect(verdict).toMatchObject({ status: 'discrepancy', enclosure: { exact: '0' } });
		expect(verdict.diagnosis).toContainEqual(
			expect.objectContaining({ kind: 'index-base', value: '1' })
		);
	});

	it('edited from a stale page is refused', async () => {
		const { number } = await enterClaim(world.as.member, claimFields());
		await editClaim(world.as.member, number, 1, claimFields({ note: 'first' }));
		await expect(
			editClaim(world.as.maintainer, number, 1, claimFields({ note: 'second' }))
		).rejects.toMatchObject({ code: 'conflict' });
	});

	it('without a solver is Open with that reason', async () => {
		const { number } = await enterClaim(
			world.as.member,
			claimFields({
				subjectKind: 'described',
				described: 'A lossy Bell test',
				quantity: 'efficiency',
				printed: '82.8 %'
			})
		);
		const view = await showClaim(world.as.observer, number);
		expect(view).toMatchObject({
			verdict: { status: 'open', reasonCode: 'no-solver' },
			caution: true
		});
	});

	it('keeps the paper once, whatever the notation of its DOI', async () => {
		await enterClaim(world.as.member, claimFields());
		const again = bibtexOf().replace('{10.5555/jip.1}', '{https://doi.org/10.5555/JIP.1}');
		await enterClaim(
			world.as.member,
			claimFields({ bibtex: again, quantity: 'local', printed: '2' })
		);
		expect((await list()).papers).toBe(1);
	});
});

describe('the ledger', () => {
	it('searches, filters, sorts and counts', async () => {
		await enterClaim(world.as.member, claimFields());
		await enterClaim(world.as.member, claimFields({ quantity: 'local', printed: '3' }));
		const third = await enterClaim(
			world.as.member,
			claimFields({
				subjectKind: 'expression',
				family: '',
				expression: 'P_A(0|0) + 100 A0 B0',
				printed: '7',
				bibtex: bibtexOf(3)
			})
		);
		await world.recompute();
		const all = await list();
		expect(all.counts).toEqual({ agreement: 1, discrepancy: 2, open: 0, all: 3 });
		expect((await list('status=agreement')).rows.map(({ printed }) => printed)).toEqual(['2.8284']);
		expect((await list('quantity=local')).total).toBe(1);
		expect((await list('sort=value')).rows.map(({ printed }) => printed)).toEqual([
			'2.8284',
			'3',
			'7'
		]);
		expect((await list('q=chsh arden')).total).toBe(2);
		expect((await list('q=%25')).total).toBe(0);
		expect((await list(`q=${encodeURIComponent("' or 1=1 --")}`)).total).toBe(0);
		await withdrawClaim(world.as.member, third.number);
		expect((await list()).total).toBe(2);
		expect((await list('withdrawn=1')).total).toBe(3);
	});

	it('shows what supersedes a claim', async () => {
		const old = await enterClaim(world.as.member, claimFields({ relation: '<=', printed: '3' }));
		const tight = await enterClaim(
			world.as.member,
			claimFields({ relation: '<=', printed: '2.83' })
		);
		await supersedeClaim(world.as.member, old.number, tight.number);
		expect(await showClaim(world.as.observer, old.number)).toMatchObject({
			state: 'superseded',
			supersededBy: { number: tight.number }
		});
		await expect(supersedeClaim(world.as.member, tight.number, old.number)).rejects.toMatchObject({
			code: 'invalid'
		});
	});
});
