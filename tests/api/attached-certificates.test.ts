import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { claims } from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { attachCertificate } from '../../src/lib/server/services/submissions/attach-certificate';
import {
	downloadAttached,
	listAttached
} from '../../src/lib/server/services/submissions/list-attached';
import { CH, certify, solved } from '../support/certificates';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeAll(async () => {
	world = await openServiceWorld();
});
afterAll(() => world.close());

let papers = 0;
/** A claim on CHSH's quantum maximum (Tsirelson 1980: 2 sqrt 2) of which nothing is computed yet. */
async function claimOf(printed: string) {
	papers++;
	const fields = claimFields({ printed, bibtex: bibtexOf(papers) });
	const { number } = await enterClaim(world.as.member, fields);
	return { number, id: (await showClaim(world.as.member, number)).id };
}

const statusOf = async (number: number) =>
	(await showClaim(world.as.observer, number)).verdict.status;

describe('a certificate attached to a claim', () => {
	it('needs no task, counts as a proof in any normalisation, and downloads as it was', async () => {
		const { member, observer } = world.as;
		const { number, id } = await claimOf('2.83');
		expect(await statusOf(number)).toBe('open');
		// In the form of Clauser and Horne: CHSH = 4 CH + 2.
		const upper = certify({ ...CH, quantity: 'npa', level: 1 });
		const note = await attachCertificate(member, number, { certificate: upper, source: 'eq. (3)' });
		expect(note).toMatch(
			/^Proves that the bound of NPA level 1 without .* is at least .* and at most 2\.8284\d*, in the claim’s normalisation/
		);
		expect(await statusOf(number)).toBe('open');
		const lower = await solved({ ...CH, quantity: 'see-saw', dimension: 2 });
		await attachCertificate(member, number, { certificate: lower });
		const { verdict } = await showClaim(observer, number);
		expect(verdict.status).toBe('agreement');
		expect(verdict.enclosure?.worth).toBe('guaranteed');

		const attached = await listAttached(observer, id);
		expect(attached).toHaveLength(2);
		expect(attached[0]).toMatchObject({
			label: 'NPA level 1',
			source: 'eq. (3)',
			by: member.actor.name,
			bytes: Buffer.byteLength(upper)
		});
		expect(attached[1]?.proves).toMatch(/^at least 2\.828427\d*$/);
		const download = await downloadAttached(observer, attached[0]?.id ?? '');
		expect(download.text).toBe(upper);
		await expect(downloadAttached(world.outsider, attached[0]?.id ?? '')).rejects.toThrow(
			'no such certificate'
		);
		expect(await listAttached(world.outsider, id)).toEqual([]);
	});

	it('proves a discrepancy as the machine would', async () => {
		const { number } = await claimOf('2.9');
		const certificate = certify({ family: { name: 'chsh' }, quantity: 'npa', level: 1 });
		await attachCertificate(world.as.member, number, { certificate });
		expect(await statusOf(number)).toBe('discrepancy');
	});

	it('speaks no more of a claim that is about another inequality since', async () => {
		const { member } = world.as;
		const { number, id } = await claimOf('2.8284');
		const certificate = await solved({ family: { name: 'chsh' }, quantity: 'local' });
		await attachCertificate(member, number, { certificate });
		const other = { family: 'i3322', bibtex: bibtexOf(papers) };
		await editClaim(member, number, 1, claimFields({ ...other, printed: '0.2509' }));
		expect((await listAttached(member, id)).map(({ proves }) => proves)).toEqual([null]);
		expect(await statusOf(number)).toBe('open');
	});

	it('is refused where its check refuses it, and nothing is kept', async () => {
		const { member, observer } = world.as;
		const { number, id } = await claimOf('2.8284');
		const good = await solved({ family: { name: 'chsh' }, quantity: 'local' });
		const forged = JSON.stringify({ ...JSON.parse(good), upper: 1.5, exact: '3/2' });
		const attach = (certificate: string, ctx = member) =>
			attachCertificate(ctx, number, { certificate });
		const field = { issues: [{ field: 'certificate' }] };
		await expect(attach(forged)).rejects.toMatchObject({ code: 'invalid', ...field });
		await expect(attach('')).rejects.toMatchObject({ code: 'invalid', ...field });
		await expect(attach('{')).rejects.toMatchObject({ code: 'invalid', ...field });
		const i3322 = await solved({ family: { name: 'i3322' }, quantity: 'local' });
		await expect(attach(i3322)).rejects.toThrow('of another inequality');
		await expect(attach(good, observer)).rejects.toMatchObject({ code: 'forbidden' });
		expect(await listAttached(member, id)).toEqual([]);
		await attach(good);
		await expect(attach(good)).rejects.toMatchObject({ code: 'conflict' });
		await withdrawClaim(member, number);
		await expect(attach(good)).rejects.toMatchObject({ code: 'conflict' });
		expect(await world.db.read.$count(claims)).toBeGreaterThan(0);
	});
});
