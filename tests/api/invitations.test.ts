import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { GroupContext, UserContext } from '../../src/lib/server/context';
import { audit, invitations, outbox } from '../../src/lib/server/db/schema';
import { derivedToken } from '../../src/lib/server/derived-token';
import { newId } from '../../src/lib/server/ids';
import { sendDueMails } from '../../src/lib/server/mail/sender';
import type { OutgoingMail } from '../../src/lib/server/mail/transport';
import { changeRole } from '../../src/lib/server/services/groups/change-role';
import { removeMember } from '../../src/lib/server/services/groups/remove-member';
import { acceptInvitation } from '../../src/lib/server/services/invitations/accept-invitation';
import { createInvitation } from '../../src/lib/server/services/invitations/create-invitation';
import { invitedAddress } from '../../src/lib/server/services/invitations/find-invitation';
import { inviteByEmail } from '../../src/lib/server/services/invitations/invite-by-email';
import { listInvitations } from '../../src/lib/server/services/invitations/list-invitations';
import { resendInvitation } from '../../src/lib/server/services/invitations/resend-invitation';
import { revokeInvitation } from '../../src/lib/server/services/invitations/revoke-invitation';
import { signUp } from '../../src/lib/server/services/users/sign-up';
import { openServiceWorld, type ServiceWorld } from '../support/service';

const START = Date.parse('2026-12-01T10:00:00Z');

let world: ServiceWorld;
let sent: OutgoingMail[];
beforeEach(async () => {
	world = await openServiceWorld();
	sent = [];
});
afterEach(() => world.close());

const DAY = 86_400_000;
const later = (ctx: GroupContext, ms: number): GroupContext => ({
	...ctx,
	now: () => new Date(Date.now() + ms)
});

const send = () =>
	sendDueMails({
		db: world.db,
		origin: 'https://merestone.example',
		now: () => new Date(),
		transport: {
			async send(mail) {
				sent.push(mail);
			},
			close: () => undefined
		}
	});

const recipients = () => sent.map(({ to }) => to.address).sort();
const outboxStates = async () =>
	(await world.db.read.select({ state: outbox.state }).from(outbox).orderBy(outbox.id)).map(
		({ state }) => state
	);

async function newcomer(email = 'new@reading.example'): Promise<UserContext> {
	const input = { name: 'Nia New', email, password: 'a heron by lichen gate 17' };
	return { ...world.anonymous, actor: await signUp(world.anonymous, input, null) };
}

describe('inviting by e-mail', () => {
	it('mails each address a link of its own, by which its reader joins', async () => {
		const done = await inviteByEmail(world.as.maintainer, {
			emails: 'New@reading.example, second@reading.example',
			role: 'member'
		});
		const emails = ['new@reading.example', 'second@reading.example'];
		expect(done).toEqual({ invited: emails, members: [], replaced: [], again: [] });
		expect(await send()).toBe(2);
		expect(recipients()).toEqual(emails);

		const mail = sent.find(({ to }) => to.address === 'new@reading.example');
		const token = /https:\/\/merestone\.example\/join\/([\w-]+)/.exec(mail?.text ?? '')?.[1] ?? '';
		expect(mail?.text).toContain('Mae Maintainer');
		expect(sent.filter(({ text }) => text.includes(token))).toHaveLength(1);
		expect(await invitedAddress(world.anonymous, `/join/${token}`)).toBe('new@reading.example');

		const person = await newcomer();
		expect(await acceptInvitation(person, token)).toEqual({ slug: 'first', joined: true });
		expect(await invitedAddress(world.anonymous, `/join/${token}`)).toBe('');
		await expect(acceptInvitation(await newcomer('x@x.example'), token)).rejects.toMatchObject({
			code: 'not-found'
		});
		// Nobody is mailed about who joined.
		expect(await send()).toBe(0);
	});

	it('keeps no token, and records who was invited', async () => {
		await inviteByEmail(world.as.owner, { emails: 'new@reading.example', role: 'owner' });
		const [row] = await world.db.read.select().from(invitations);
		const trail = await world.db.read.select().from(audit);
		const kept = JSON.stringify([row, trail, await world.db.read.select().from(outbox)]);
		expect(kept).not.toContain(derivedToken('invitation', row?.id ?? ''));
		expect(trail).toMatchObject([
			{
				action: 'invitation.mailed',
				actorId: world.as.owner.actor.id,
				after: { email: 'new@reading.example', role: 'owner' }
			}
		]);
	});

	it('sends nothing to members, and says so', async () => {
		const done = await inviteByEmail(world.as.owner, {
			emails: 'mo.member@reading.example new@reading.example',
			role: 'observer'
		});
		expect(done.members).toEqual(['mo.member@reading.example']);
		expect(done.invited).toEqual(['new@reading.example']);
		await send();
		expect(recipients()).toEqual(['new@reading.example']);
		// A member of another group only is no member of this one.
		const other = await inviteByEmail(world.as.owner, {
			emails: 'xenia.outside@reading.example',
			role: 'observer'
		});
		expect(other.members).toEqual([]);
	});

	it('replaces what stood for the same address, in this group only', async () => {
		const invite = (ctx: GroupContext, role: string) =>
			inviteByEmail(ctx, { emails: 'new@reading.example', role });
		await invite(world.outsider, 'member');
		await invite(world.as.owner, 'member');
		const again = await invite(world.as.owner, 'observer');
		expect(again.replaced).toEqual(['new@reading.example']);
		expect(await outboxStates()).toEqual(['waiting', 'dropped', 'waiting']);
		expect((await listInvitations(world.as.owner)).map(({ role }) => role)).toEqual(['observer']);
		expect(await listInvitations(world.outsider)).toHaveLength(1);
	});

	it('leaves the first standing when the same is sent once more within a minute', async () => {
		const emails = 'new@reading.example';
		const at = (ctx: GroupContext, seconds: number): GroupContext => ({
			...ctx,
			now: () => new Date(START + seconds * 1000)
		});
		const invite = (ctx: GroupContext, seconds: number, to = emails) =>
			inviteByEmail(at(ctx, seconds), { emails: to, role: 'member' });
		await invite(world.as.owner, 0);
		const [first] = await world.db.read.select().from(invitations);

		const second = await invite(world.as.owner, 59, `${emails}, second@reading.example`);
		expect(second).toMatchObject({ invited: ['second@reading.example'], replaced: [] });
		expect(second.again).toEqual([emails]);
		const standing = await world.db.read.select().from(invitations);
		expect(standing.filter(({ email }) => email === emails)).toEqual([first]);

		// Somebody else who invites means it, and so does whoever comes back to it later.
		expect(await invite(world.as.maintainer, 59)).toMatchObject({ replaced: [emails], again: [] });
		expect(await invite(world.as.maintainer, 119)).toMatchObject({ replaced: [emails], again: [] });
	});

	it('lets two presses at once send one mail', async () => {
		const invite = () =>
			inviteByEmail(world.as.owner, { emails: 'new@reading.example', role: 'member' });
		const both = await Promise.all([invite(), invite()]);
		expect(both.map(({ invited }) => invited.length).sort()).toEqual([0, 1]);
		expect(await outboxStates()).toEqual(['waiting']);
	});

	it.each([
		['no address', '', 'at least one'],
		['one that is none', 'new@reading.example, wren@', '“wren@” is no e-mail address'],
		['too many', Array.from({ length: 21 }, (_, i) => `p${i}@x.example`).join(' '), 'At most 20'],
		['a line of a header', 'a@x.example\r\nBcc: b@x.example', '“Bcc:” is no e-mail address'],
		['a long text', 'x'.repeat(9_000), 'At most 8000 characters']
	])('refuses %s and sends nothing', async (_, emails, message) => {
		await expect(inviteByEmail(world.as.owner, { emails, role: 'member' })).rejects.toMatchObject({
			code: 'invalid',
			issues: [{ field: 'emails', message: expect.stringContaining(message) }]
		});
		expect(await outboxStates()).toEqual([]);
	});

	it.each([
		['owner', 'owner', true],
		['maintainer', 'maintainer', true],
		['maintainer', 'owner', false],
		['member', 'observer', false],
		['observer', 'observer', false]
	] as const)('by a %s for a %s: %s', async (by, role, allowed) => {
		const inviting = inviteByEmail(world.as[by], { emails: 'new@reading.example', role });
		if (allowed) expect((await inviting).invited).toHaveLength(1);
		else await expect(inviting).rejects.toMatchObject({ code: 'forbidden' });
	});
});

describe('a standing invitation', () => {
	const invited = async (ctx: GroupContext = world.as.owner, role = 'member') => {
		await inviteByEmail(ctx, { emails: 'new@reading.example', role });
		const [view] = await listInvitations(world.as.owner);
		if (!view) throw new Error('no invitation stands');
		return view;
	};

	it('is listed with what became of its mail', async () => {
		expect(await invited(world.as.maintainer)).toMatchObject({
			email: 'new@reading.example',
			createdBy: 'Mae Maintainer',
			mail: 'waiting',
			mayResend: true
		});
		await send();
		await createInvitation(world.as.owner, { role: 'owner' });
		const listed = await listInvitations(world.as.maintainer);
		expect(listed.map(({ email, mail, mayResend }) => [email, mail, mayResend])).toEqual([
			[null, null, false],
			['new@reading.example', 'sent', true]
		]);
		expect(await listInvitations(world.as.member)).toEqual([]);
	});

	it('is sent again with the same link, and lives fourteen days from then', async () => {
		const { id, expiresAt } = await invited();
		await expect(resendInvitation(world.as.owner, id)).rejects.toMatchObject({ code: 'conflict' });
		await send();
		const tomorrow = later(world.as.owner, DAY);
		expect(await resendInvitation(tomorrow, id)).toEqual({ email: 'new@reading.example' });
		const [view] = await listInvitations(tomorrow);
		expect(Date.parse(view?.expiresAt ?? '') - Date.parse(expiresAt)).toBeGreaterThan(DAY - 60_000);
		await world.db.write((tx) => tx.update(outbox).set({ notBefore: new Date() }));
		await send();
		expect(sent).toHaveLength(2);
		const links = sent.map(({ text }) => /\/join\/[\w-]+/.exec(text)?.[0]);
		expect(links[0]).toBe(links[1]);
		expect(sent[0]?.messageId).not.toBe(sent[1]?.messageId);
	});

	it('is not sent again by those who could not have made it, nor to another group', async () => {
		const { id } = await invited(world.as.owner, 'owner');
		await send();
		const refused = { code: 'forbidden' };
		await expect(resendInvitation(world.as.maintainer, id)).rejects.toMatchObject(refused);
		await expect(resendInvitation(world.as.member, id)).rejects.toMatchObject(refused);
		await expect(resendInvitation(world.outsider, id)).rejects.toMatchObject({ code: 'not-found' });
		await expect(resendInvitation(later(world.as.owner, 15 * DAY), id)).rejects.toMatchObject({
			code: 'not-found'
		});
	});

	it('is revoked together with the mail that waits', async () => {
		const { id } = await invited();
		await revokeInvitation(world.as.maintainer, id);
		expect(await send()).toBe(0);
		expect(await outboxStates()).toEqual(['dropped']);
		await expect(
			acceptInvitation(await newcomer(), derivedToken('invitation', id))
		).rejects.toMatchObject({ code: 'not-found' });
		await expect(revokeInvitation(world.as.owner, id)).rejects.toMatchObject({ code: 'not-found' });
	});

	it('ends when its maker could no longer make it', async () => {
		const maker = world.as.maintainer;
		const made = async () => {
			await createInvitation(maker, { role: 'maintainer' });
			await createInvitation(maker, { role: 'observer' });
		};
		const standing = async () =>
			(await listInvitations(world.as.owner)).map(({ role }) => role).sort();
		const give = (role: string) => changeRole(world.as.owner, { userId: maker.actor.id, role });
		await made();
		await give('owner');
		expect(await standing()).toEqual(['maintainer', 'observer']);
		await give('member');
		expect(await standing()).toEqual([]);
		await give('maintainer');
		await made();
		await removeMember(world.as.owner, maker.actor.id);
		expect(await standing()).toEqual([]);
		const trail = await world.db.read
			.select()
			.from(audit)
			.where(eq(audit.action, 'invitation.revoked'));
		expect(trail).toHaveLength(4);
	});

	it('has a token nobody can make up', async () => {
		await invited();
		const guess = derivedToken('invitation', newId());
		await expect(acceptInvitation(await newcomer(), guess)).rejects.toMatchObject({
			code: 'not-found'
		});
		expect(await invitedAddress(world.anonymous, '/join/../account')).toBe('');
	});
});
