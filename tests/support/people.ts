import type { Role } from '../../src/lib/ledger/roles';
import type { TestServer } from './server';
import { Visitor, type Fields } from './visitor';

/** Invented; `.example` reaches nobody. */
export const PASSWORD = 'lichen gate 17 and a heron';

let people = 0;

/** Someone who has just signed up. */
export async function newPerson(server: TestServer, fields: Fields = {}): Promise<Visitor> {
	const visitor = new Visitor(server);
	people++;
	const response = await visitor.submit('/sign-up', {
		name: `Reader ${people}`,
		email: `reader-${people}@group.example`,
		password: PASSWORD,
		...fields
	});
	if (response.status !== 303) {
		throw new Error(`signing up: ${response.status} ${await response.text()}`);
	}
	return visitor;
}

/** Starts a group and returns its slug. */
export async function startGroup(owner: Visitor, name: string): Promise<string> {
	const response = await owner.submit('/groups/new', { name });
	const location = response.headers.get('location') ?? '';
	if (response.status !== 303 || !location.startsWith('/g/')) {
		throw new Error(`starting a group: ${response.status} ${await response.text()}`);
	}
	return location.slice('/g/'.length);
}

/** Makes a joining link and returns its path. */
export async function joiningLink(by: Visitor, slug: string, role: Role): Promise<string> {
	const response = await by.submit(`/g/${slug}/members?/invite`, { role });
	const path = /\/join\/[\w-]{20,}/.exec(await response.text())?.[0];
	if (!path) throw new Error(`making a joining link: ${response.status}`);
	return path;
}

export interface GroupOfFour extends Readonly<Record<Role, Visitor>> {
	readonly slug: string;
	/** The owner of another group. */
	readonly outsider: Visitor;
	readonly outsiderSlug: string;
	readonly anonymous: Visitor;
}

/** A group with one person of each role, somebody of another group, and nobody. */
export async function groupOfFour(server: TestServer, name: string): Promise<GroupOfFour> {
	const owner = await newPerson(server);
	const slug = await startGroup(owner, name);
	const joined = async (role: Role) => {
		const person = await newPerson(server);
		const response = await person.submit(await joiningLink(owner, slug, role));
		if (response.status !== 303) throw new Error(`joining as ${role}: ${response.status}`);
		return person;
	};
	const outsider = await newPerson(server);
	return {
		slug,
		owner,
		maintainer: await joined('maintainer'),
		member: await joined('member'),
		observer: await joined('observer'),
		outsider,
		outsiderSlug: await startGroup(outsider, `${name}, the others`),
		anonymous: new Visitor(server)
	};
}
