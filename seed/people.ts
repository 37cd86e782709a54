import type { Role } from '../src/lib/ledger/roles';

/** The invented reading group of the demo. Nobody here exists; `.example` addresses reach no one. */
export const GROUP = {
	slug: 'harrow-street',
	name: 'Harrow Street reading group',
	description: 'Bounds we meet on Thursdays, checked before we cite them.'
};

/** One password for all demo accounts; the demo runs on this machine only. */
export const DEMO_PASSWORD = 'seven boundary stones';

export interface Person {
	readonly key: 'owner' | 'maintainer' | 'member' | 'observer';
	readonly name: string;
	readonly email: string;
	readonly role: Role;
}

export const PEOPLE: readonly Person[] = [
	{ key: 'owner', name: 'Ines Halloran', email: 'ines@harrow.example', role: 'owner' },
	{ key: 'maintainer', name: 'Tomas Brandvik', email: 'tomas@harrow.example', role: 'maintainer' },
	{ key: 'member', name: 'Wren Adeyo', email: 'wren@harrow.example', role: 'member' },
	{ key: 'observer', name: 'Pia Sandmark', email: 'pia@harrow.example', role: 'observer' }
];
