import type { Role } from '../ledger/roles';
import type { Database } from './db/client';

export interface Actor {
	readonly id: string;
	readonly name: string;
	readonly email: string;
	readonly isAdmin: boolean;
}

/** What a service verb runs in: the database, who asks, and the request it serves. */
export interface Context {
	readonly db: Database;
	/** Null for a visitor who has not signed in. */
	readonly actor: Actor | null;
	readonly requestId: string;
	now(): Date;
}

/** A context of someone who has signed in; made by `requireUser` and by the seed. */
export interface UserContext extends Context {
	readonly actor: Actor;
}

/** A context inside a group the actor belongs to; made by `requireRole` and by the seed. */
export interface GroupContext extends UserContext {
	readonly group: { readonly id: string; readonly slug: string; readonly name: string };
	readonly role: Role;
}
