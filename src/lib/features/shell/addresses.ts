/** Addresses the shell links to, kept in one place. */
export const ADDRESSES = {
	bounds: '/',
	method: '/method',
	signIn: '/sign-in',
	signOut: '/sign-out',
	account: '/account',
	newGroup: '/groups/new',
	/** Someone without an account makes one, then a group. */
	newcomer: '/sign-up?next=/groups/new'
} as const;

export interface ShellGroup {
	readonly slug: string;
	readonly name: string;
}

export interface ShellPerson {
	readonly name: string;
}

interface NavLink {
	readonly href: string;
	readonly label: string;
	readonly on: boolean;
}

/** The main navigation: a group's pages inside a group, the public ones elsewhere. */
export function navLinks(path: string, group: ShellGroup | null): readonly NavLink[] {
	const inside = (href: string) => path === href || path.startsWith(`${href}/`);
	if (!group)
		return [
			{ href: ADDRESSES.bounds, label: 'Tightest bounds', on: path === ADDRESSES.bounds },
			{ href: ADDRESSES.method, label: 'How it is checked', on: inside(ADDRESSES.method) }
		];
	const base = `/g/${group.slug}`;
	return [
		{ href: base, label: 'Ledger', on: path === base || inside(`${base}/claims`) },
		{
			href: `${base}/inequalities`,
			label: 'Inequalities',
			on: inside(`${base}/inequalities`)
		},
		{ href: `${base}/references`, label: 'References', on: inside(`${base}/references`) },
		{ href: `${base}/members`, label: 'Members', on: inside(`${base}/members`) }
	];
}
