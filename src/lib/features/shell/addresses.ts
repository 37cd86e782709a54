/** Addresses the shell links to, kept in one place. */
export const ADDRESSES = {
	bounds: '/',
	method: '/method',
	signIn: '/sign-in',
	signOut: '/sign-out',
	home: '/home',
	news: '/news',
	ownTasks: '/home/tasks',
	account: '/account',
	notifications: '/account/notifications',
	mail: '/admin/mail',
	newGroup: '/groups/new',
	/** Someone without an account makes one, then a group. */
	newcomer: '/sign-up?next=/groups/new'
} as const;

export interface ShellGroup {
	readonly slug: string;
	readonly name: string;
	/** Tasks of the group that wait for the viewer. */
	readonly waiting?: number;
}

export interface ShellPerson {
	readonly name: string;
	readonly isAdmin: boolean;
}

interface NavLink {
	readonly href: string;
	readonly label: string;
	readonly on: boolean;
	/** A number beside the label and what it means, for screen readers. */
	readonly count?: { readonly number: number; readonly meaning: string };
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
	const under = (part: string, label: string): NavLink => ({
		href: `${base}/${part}`,
		label,
		on: inside(`${base}/${part}`)
	});
	return [
		{ href: base, label: 'Ledger', on: path === base || inside(`${base}/claims`) },
		under('inequalities', 'Inequalities'),
		under('references', 'References'),
		{ ...under('tasks', 'Tasks'), ...waitingCount(group.waiting ?? 0) },
		under('activity', 'Activity'),
		under('members', 'Members')
	];
}

function waitingCount(number: number): Pick<NavLink, 'count'> {
	if (number === 0) return {};
	return { count: { number, meaning: number === 1 ? 'waits for you' : 'wait for you' } };
}

/** The person's own pages, for the menu that bears their name. */
export function personLinks(path: string, person: ShellPerson, unread: number): readonly NavLink[] {
	const own = (href: string, label: string): NavLink => ({ href, label, on: path === href });
	return [
		own(ADDRESSES.home, 'Home'),
		{
			...own(ADDRESSES.news, 'What is new'),
			...(unread > 0 && { count: { number: unread, meaning: 'unread' } })
		},
		own(ADDRESSES.ownTasks, 'My tasks'),
		own(ADDRESSES.account, 'Account'),
		own(ADDRESSES.notifications, 'Notifications'),
		...(person.isAdmin ? [own(ADDRESSES.mail, 'Mail')] : [])
	];
}
