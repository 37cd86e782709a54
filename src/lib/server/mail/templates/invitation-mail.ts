import { roleWithArticle, type Role } from '../../../ledger/roles';
import type { MailContent } from '../mail-content';

export interface InvitationFacts {
	readonly invitedBy: string;
	readonly groupName: string;
	readonly description: string;
	readonly role: Role;
	readonly expiresAt: Date;
	readonly link: string;
}

const ROLE_WORDS: Readonly<Record<Role, string>> = {
	observer: 'reads its ledger',
	member: 'enters claims and works on tasks',
	maintainer: 'also opens tasks, decides on submissions and publishes',
	owner: 'also changes roles and settings'
};

/** To somebody who may have no account, so that no link turns it off. */
export function invitationMail(facts: InvitationFacts): MailContent {
	const { invitedBy, groupName, role, expiresAt, link } = facts;
	const until = `${expiresAt.toISOString().slice(0, 16).replace('T', ' ')} UTC`;
	return {
		subject: `${invitedBy} invites you to ${groupName}`,
		tag: { text: 'Invitation', tone: 'plain' },
		heading: `Join ${groupName}`,
		paragraphs: [
			`${invitedBy} invites you to the reading group ${groupName} on Merestone, a ledger of bounds that papers claim for Bell inequalities, each recomputed by the server.`,
			`You would join as ${roleWithArticle(role)}, who ${ROLE_WORDS[role]}.`
		],
		quote: facts.description ? { title: 'About the group', text: facts.description } : null,
		facts: [
			['Group', groupName],
			['Role', role],
			['Good until', until]
		],
		action: { label: 'Join the group', address: link },
		footer: {
			why: 'The link lets one person join, once. If you don’t know who this is from, ignore this mail: nothing happens unless you open the link and join.',
			choices: null,
			unsubscribe: null
		}
	};
}
