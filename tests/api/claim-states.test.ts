import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { proposeClaim } from '../../src/lib/server/services/claims/propose-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { restoreClaim } from '../../src/lib/server/services/claims/restore-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { supersedeClaim } from '../../src/lib/server/services/claims/supersede-claim';
import { unpublishClaim } from '../../src/lib/server/services/claims/unpublish-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

const list = (query = '') =>
	listClaims(world.as.observer, parseLedgerQuery(new URLSearchParams(query)));
const enter = async (printed: string) =>
	(await enterClaim(world.as.member, claimFields({ relation: '<=', printed }))).number;

describe('a superseded claim', () => {
	it('is neither listed nor counted unless asked for, and can be restored', async () => {
		const [old, tight] = [await enter('3'), await enter('2.83')];
		await supersedeClaim(world.as.member, old, tight);
		expect((await list()).counts.all).toBe(1);
		expect((await list()).rows.map(({ number }) => number)).toEqual([tight]);
		expect((await list('withdrawn=1')).counts.all).toBe(2);
		await expect(restoreClaim(world.as.observer, old)).rejects.toMatchObject({ code: 'forbidden' });
		await restoreClaim(world.as.member, old);
		expect(await showClaim(world.as.member, old)).toMatchObject({
			state: 'active',
			supersededBy: null
		});
		expect((await list()).counts.all).toBe(2);
	});

	it('needs another, active claim of the group', async () => {
		const [first, second] = [await enter('3'), await enter('2.83')];
		await supersedeClaim(world.as.member, first, second);
		const issue = (message: RegExp) => ({
			code: 'invalid',
			issues: [{ field: 'by', message: expect.stringMatching(message) as unknown }]
		});
		const by = (number: number) => supersedeClaim(world.as.member, second, number);
		await expect(by(99)).rejects.toMatchObject(issue(/no claim 99 in this group/));
		await expect(by(NaN)).rejects.toMatchObject(issue(/no claim of that number/));
		await expect(by(second)).rejects.toMatchObject(issue(/itself/));
		await expect(by(first)).rejects.toMatchObject(issue(/not active/));
		await withdrawClaim(world.as.member, second);
		await expect(supersedeClaim(world.as.member, second, first)).rejects.toMatchObject(
			issue(/withdrawn/)
		);
	});
});

describe('a proposed claim', () => {
	it('is found by those who publish, and taken back by whoever proposed it', async () => {
		const [mine, other] = [await enter('3'), await enter('2.83')];
		await proposeClaim(world.as.member, mine);
		const proposed = await list('proposed=1');
		expect(proposed.rows.map(({ number }) => number)).toEqual([mine]);
		expect(proposed.counts.all).toBe(1);
		expect((await list()).proposed).toBe(1);
		await expect(unpublishClaim(world.as.observer, mine)).rejects.toMatchObject({
			code: 'forbidden'
		});
		await unpublishClaim(world.as.member, mine);
		const { visibility, history } = await showClaim(world.as.member, mine);
		expect(visibility).toBe('group');
		expect(history[0]?.text).toBe('Proposal taken back');
		await publishClaim(world.as.maintainer, other);
		await expect(unpublishClaim(world.as.member, other)).rejects.toMatchObject({
			code: 'forbidden'
		});
	});
});

describe('the history', () => {
	it('names only what an edit changed', async () => {
		const fields = claimFields();
		const { number } = await enterClaim(world.as.member, fields);
		const { reference } = await showClaim(world.as.member, number);
		// As the form sends it: the paper is known by now.
		const known = { ...fields, paper: 'known', referenceId: reference.id, bibtex: '' } as const;
		await editClaim(world.as.member, number, 1, { ...known, reading: 'truncated' });
		const { history } = await showClaim(world.as.member, number);
		expect(history[0]?.text).toBe('How it is printed changed from as-printed to truncated');
	});

	it('tells everybody of a changed value, and of nothing that was changed with it', async () => {
		const { number } = await enterClaim(world.as.member, claimFields({ printed: '2.83' }));
		const { id, reference } = await showClaim(world.as.member, number);
		const fields = claimFields({ paper: 'known', referenceId: reference.id, bibtex: '' });
		await editClaim(world.as.member, number, 1, { ...fields, note: 'ask Tam' });
		await editClaim(world.as.member, number, 2, {
			...fields,
			printed: '2.828',
			note: 'told by Tam'
		});
		await editClaim(world.as.member, number, 3, { ...fields, printed: '2.828', note: '' });
		await publishClaim(world.as.maintainer, number);
		const texts = ({ history }: { readonly history: readonly { readonly text: string }[] }) =>
			history.map(({ text }) => text);
		expect(texts(await showClaim(world.as.member, number))).toContain(
			'Value changed from 2.8284 to 2.828; Note changed from ask Tam to told by Tam'
		);
		expect(texts(await showPublicClaim(world.anonymous, id))).toEqual([
			'Published',
			'Value changed from 2.8284 to 2.828',
			'Value changed from 2.83 to 2.8284',
			'Entered'
		]);
	});

	it('has entering before a verdict that was there at once', async () => {
		await enterClaim(world.as.member, claimFields());
		await world.recompute();
		const at = new Date();
		const second = await enterClaim(
			{ ...world.as.member, now: () => at },
			claimFields({ printed: '2.83' })
		);
		const { history } = await showClaim(world.as.member, second.number);
		expect(history.map(({ text }) => text)).toEqual(['Recomputed: Agreement', 'Entered']);
	});
});
