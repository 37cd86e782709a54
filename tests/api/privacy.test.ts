import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { parseBoundsQuery } from '../../src/lib/schemas/bounds-query';
import type { GroupContext } from '../../src/lib/server/context';
import { listBounds } from '../../src/lib/server/services/bounds/list-bounds';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { proposeClaim } from '../../src/lib/server/services/claims/propose-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { unpublishClaim } from '../../src/lib/server/services/claims/unpublish-claim';
import { searchInequalities } from '../../src/lib/server/services/inequalities/search-inequalities';
import { showInequality } from '../../src/lib/server/services/inequalities/show-inequality';
import { showPublicInequality } from '../../src/lib/server/services/inequalities/show-public-inequality';
import { readClaim } from '../../src/lib/server/services/readings/read-claim';
import { downloadResult } from '../../src/lib/server/services/recomputations/download-result';
import { showRecomputation } from '../../src/lib/server/services/recomputations/show-recomputation';
import { showPublicReference } from '../../src/lib/server/services/references/show-public-reference';
import { confirmTranscription } from '../../src/lib/server/services/transcriptions/confirm-transcription';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

/** An inequality nobody would think of by themselves. */
const SECRET = claimFields({
	subjectKind: 'expression',
	expression: '17 A0 B0 + 5 A0 B1 + 3 A1 B0 - 11 A1 B1',
	printed: '31.4',
	note: 'the secret note',
	locator: 'secret locator',
	bibtex: bibtexOf(77).replace('part 77', 'the secret paper')
});

const bounds = () => listBounds(world.anonymous, parseBoundsQuery(new URLSearchParams()));
const notFound = { code: 'not-found' };

async function enteredBy(ctx: GroupContext, fields = SECRET) {
	const { number } = await enterClaim(ctx, fields);
	await world.recompute();
	return showClaim(ctx, number);
}

/** A second person says that the claim is the paper's, as a discrepancy needs to be public. */
const confirm = (number: number) =>
	confirmTranscription(world.as.maintainer, number, {
		valueMatches: 'yes',
		locatorMatches: 'yes',
		inequalityMatches: 'yes',
		note: '',
		version: 1
	});

describe('a private claim', () => {
	it('is nowhere for the public or for another group', async () => {
		const claim = await enteredBy(world.as.member);
		const inequalityId = claim.subject.inequalityId ?? '';
		expect((await bounds()).rows).toEqual([]);
		await expect(showPublicClaim(world.anonymous, claim.id)).rejects.toMatchObject(notFound);
		await expect(showPublicInequality(world.anonymous, inequalityId)).rejects.toMatchObject(
			notFound
		);
		await expect(showInequality(world.outsider, inequalityId)).rejects.toMatchObject(notFound);
		for (const { id } of claim.recomputations) {
			for (const ctx of [world.anonymous, world.outsider]) {
				await expect(showRecomputation(ctx, id)).rejects.toMatchObject(notFound);
				await expect(downloadResult(ctx, id)).rejects.toMatchObject(notFound);
			}
			expect((await downloadResult(world.as.observer, id)).status).toBe('done');
		}
		const found = await searchInequalities(world.outsider, '');
		expect(found.map(({ id }) => id)).not.toContain(inequalityId);
		// Typing the same inequality does not tell that someone has it.
		const reading = await readClaim(world.outsider, { ...SECRET, printed: '' });
		expect(reading).toMatchObject({ knownAs: null, stations: null });
	});

	it('that is proposed is still private', async () => {
		const claim = await enteredBy(world.as.member);
		await proposeClaim(world.as.member, claim.number);
		await expect(showPublicClaim(world.anonymous, claim.id)).rejects.toMatchObject(notFound);
		expect((await bounds()).rows).toEqual([]);
	});

	it('on an inequality with a public claim does not show there, but what it proved does', async () => {
		const open = await enteredBy(world.as.member, claimFields());
		await publishClaim(world.as.maintainer, open.number);
		const hidden = await enteredBy(
			world.as.member,
			claimFields({
				quantity: 'npa',
				level: '3',
				printed: '2.82842712',
				note: 'the secret note',
				bibtex: bibtexOf(9)
			})
		);
		const page = await showPublicInequality(world.anonymous, open.subject.inequalityId ?? '');
		const row = (await bounds()).rows[0];
		for (const shown of [page, row, await showPublicClaim(world.anonymous, open.id)]) {
			expect(JSON.stringify(shown)).not.toMatch(/secret|part 9|jip\.9|2\.82842712"/);
			expect(JSON.stringify(shown)).not.toContain(hidden.id);
		}
		expect(page.claims).toBe(1);
		// A checked maximum is a fact about the inequality, with a certificate that anyone may check.
		const run = page.recomputations.find(({ label }) => label === 'NPA level 3');
		const facts = await showRecomputation(world.anonymous, run?.id ?? '');
		expect(JSON.stringify(facts)).not.toMatch(/secret|part 9|jip\.9|2\.82842712"/);
		expect((await downloadResult(world.outsider, run?.id ?? '')).status).toBe('done');
	});

	it('keeps to itself a run that is no station of anything, such as a minimum', async () => {
		const open = await enteredBy(world.as.member, claimFields());
		await publishClaim(world.as.maintainer, open.number);
		const hidden = await enteredBy(
			world.as.member,
			claimFields({ quantity: 'local', sense: 'min', printed: '-2' })
		);
		const page = await showPublicInequality(world.anonymous, open.subject.inequalityId ?? '');
		expect(page.recomputations.map(({ label }) => label)).not.toContain(
			'Deterministic strategies, minimum'
		);
		const id = hidden.recomputationId ?? '';
		await expect(showRecomputation(world.anonymous, id)).rejects.toMatchObject(notFound);
		await expect(showRecomputation(world.outsider, id)).rejects.toMatchObject(notFound);
	});
});

describe('a public claim', () => {
	it('shows its facts, but nobody’s name, note or number', async () => {
		const bibtex =
			SECRET.bibtex?.replace('year ', 'annote = {my {private} remark},\n  year ') ?? '';
		const claim = await enteredBy(world.as.member, { ...SECRET, printed: '27.9', bibtex });
		await confirm(claim.number);
		await publishClaim(world.as.maintainer, claim.number);
		const shown = await showPublicClaim(world.anonymous, claim.id);
		const text = JSON.stringify(shown);
		expect(shown).toMatchObject({ printed: '27.9', locator: 'secret locator' });
		expect(text).toContain('the secret paper');
		expect(text).not.toMatch(
			/secret note|Mo Member|Mae Maintainer|reading\.example|private|"number":[1-9]/
		);
		expect(shown.history.every(({ who }) => who === null)).toBe(true);
		expect(shown).not.toHaveProperty('input');
	});

	it('shows its paper, with nothing of the group and none of its private claims', async () => {
		const bibtex =
			SECRET.bibtex?.replace('year ', 'annote = {my {private} remark},\n  year ') ?? '';
		const open = await enteredBy(world.as.member, { ...SECRET, printed: '27.9', bibtex });
		const paperId = open.reference.id;
		await expect(showPublicReference(world.anonymous, paperId)).rejects.toMatchObject(notFound);
		await confirm(open.number);
		await publishClaim(world.as.maintainer, open.number);
		const hidden = await enteredBy(
			world.as.member,
			claimFields({ printed: '2.8284', note: 'hidden note', locator: 'hidden place', bibtex })
		);
		expect(hidden.reference.id).toBe(paperId);
		const shown = await showPublicReference(world.anonymous, paperId);
		expect(shown.claimRows.map(({ id }) => id)).toEqual([open.id]);
		expect(Object.keys(shown).sort()).toEqual(
			[
				'arxiv',
				'bibtex',
				'claimRows',
				'cslJson',
				'doi',
				'formatted',
				'id',
				'notices',
				'short',
				'source'
			].concat(['title', 'year'])
		);
		expect(JSON.stringify(shown)).toContain('the secret paper');
		expect(JSON.stringify(shown)).not.toMatch(
			/secret note|hidden (note|place)|Mo Member|Mae Maintainer|reading\.example|private|"number":[1-9]/
		);
		await unpublishClaim(world.as.maintainer, open.number);
		await expect(showPublicReference(world.anonymous, paperId)).rejects.toMatchObject(notFound);
	});

	it('is gone once it is taken back', async () => {
		const claim = await enteredBy(world.as.member, claimFields());
		await publishClaim(world.as.maintainer, claim.number);
		expect((await showPublicClaim(world.anonymous, claim.id)).verdict.status).toBe('agreement');
		await unpublishClaim(world.as.maintainer, claim.number);
		await expect(showPublicClaim(world.anonymous, claim.id)).rejects.toMatchObject(notFound);
	});
});

describe('the table of bounds', () => {
	it('ranks claims by their safe ends, in one normalisation, beside our own', async () => {
		const enter = async (fields: Parameters<typeof claimFields>[0], n: number) => {
			const { number } = await enterClaim(
				world.as.member,
				claimFields({ ...fields, bibtex: bibtexOf(n) })
			);
			await publishClaim(world.as.maintainer, number);
		};
		await enter({ printed: '2.83', relation: '<=' }, 1);
		// As CH = (CHSH - 2)/4: at most 0.2072 says CHSH <= 2.829 (with the half unit, 0.20725: 2.829).
		await enter(
			{
				subjectKind: 'collins-gisin',
				table: '0 -1 0\n-1 1 1\n0 1 -1',
				relation: '<=',
				printed: '0.2072'
			},
			2
		);
		await enter({ printed: '2.8', relation: '>=' }, 3);
		await enter({ quantity: 'local', printed: '2' }, 4);
		await enter({ printed: '2.7', relation: '<=' }, 5);
		await world.recompute();
		await confirm(5);
		const { rows, counts } = await bounds();
		expect(rows).toHaveLength(1);
		expect(rows[0]).toMatchObject({
			inequality: { text: 'CHSH' },
			local: '2',
			noSignalling: '4',
			claimedUpper: { printed: '2.829', short: 'Arden & Voss 2004' },
			claimedLower: { printed: '2.8' },
			closed: true
		});
		expect(Number(rows[0]?.ownLower)).toBeLessThanOrEqual(2 * Math.SQRT2);
		expect(Number(rows[0]?.ownUpper)).toBeGreaterThanOrEqual(2 * Math.SQRT2);
		// The untrue bound is a discrepancy: confirmed by a second person, counted, but no bound.
		expect(counts).toMatchObject({ agreement: 4, discrepancy: 1 });
	});
});
