/** Roles nest: each may do all that the ones before it may. */
export const ROLES = ['observer', 'member', 'maintainer', 'owner'] as const;
export type Role = (typeof ROLES)[number];

export function hasRole(role: Role | null | undefined, atLeast: Role): boolean {
	return role != null && ROLES.indexOf(role) >= ROLES.indexOf(atLeast);
}

/** The roles that may do all that this one may, for a query. */
export function rolesFrom(atLeast: Role): Role[] {
	return ROLES.filter((role) => hasRole(role, atLeast));
}

/** `an observer`, `a member`. */
export function roleWithArticle(role: Role): string {
	return `${/^[aeiou]/.test(role) ? 'an' : 'a'} ${role}`;
}
