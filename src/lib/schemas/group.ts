import { z } from 'zod';
import { ROLES } from '../ledger/roles';
import { oneLine } from './account';

/** Words that stand, or may one day stand, where a group's address does. */
export const RESERVED_SLUGS = ['new', 'all', 'mine', 'admin', 'api', 'join', 'demo'] as const;

export const groupSlug = z
	.string()
	.trim()
	.toLowerCase()
	.max(40, 'At most 40 characters')
	.regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'Only letters a to z, digits and single hyphens between them')
	.min(3, 'At least 3 characters')
	.refine((slug) => !RESERVED_SLUGS.some((word) => word === slug), 'This address is reserved');

export const startGroupInput = z.object({
	name: oneLine(80, 'Give the group a name'),
	/** Empty: made from the name. */
	slug: groupSlug.or(z.literal('')).default(''),
	description: z.string().trim().max(300, 'At most 300 characters').default('')
});
/** `Café Nine, reading group` -> `cafe-nine-reading-group`; empty when nothing is left of it. */
export function slugFromName(name: string): string {
	return name
		.normalize('NFKD')
		.replace(/\p{M}/gu, '')
		.toLowerCase()
		.replace(/[^a-z0-9]+/g, '-')
		.slice(0, 40)
		.replace(/^-+|-+$/g, '');
}

export const createInvitationInput = z.object({ role: z.enum(ROLES).default('member') });

export const changeRoleInput = z.object({ userId: z.string().max(40), role: z.enum(ROLES) });
