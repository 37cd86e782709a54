import { z } from 'zod';
import { ROLES } from '../ledger/roles';
import { oneLine } from './account';
import { addressListProblem, LONGEST_ADDRESS_LIST, readAddressList } from './address-list';

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

const groupName = oneLine(80, 'Give the group a name');
const groupDescription = z.string().trim().max(300, 'At most 300 characters').default('');

export const startGroupInput = z.object({
	name: groupName,
	/** Empty: made from the name. */
	slug: groupSlug.or(z.literal('')).default(''),
	description: groupDescription
});

/** Seconds: below, no search gets anywhere; above, one recomputation holds up everybody's. */
const GROUP_BUDGET = { least: 5, most: 600 } as const;

export const groupSettingsInput = z.object({
	name: groupName,
	description: groupDescription,
	/** As typed; empty: the site's setting. */
	budgetSeconds: z
		.string()
		.trim()
		.refine(
			(text) =>
				text === '' ||
				(/^\d{1,4}$/.test(text) &&
					Number(text) >= GROUP_BUDGET.least &&
					Number(text) <= GROUP_BUDGET.most),
			`Give whole seconds from ${GROUP_BUDGET.least} to ${GROUP_BUDGET.most}, or nothing`
		)
		.default(''),
	/** Left out: stays as it is. */
	slug: groupSlug.optional(),
	/** Of the settings the form was filled from, so that nobody overwrites what they haven't seen. */
	version: z.string().max(64).default('')
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

export const mailInvitationInput = z.object({
	emails: z
		.string()
		.max(LONGEST_ADDRESS_LIST, `At most ${LONGEST_ADDRESS_LIST} characters`)
		.transform((text, ctx) => {
			const list = readAddressList(text);
			const message = addressListProblem(list);
			if (message) ctx.addIssue({ code: 'custom', message });
			return list.addresses;
		}),
	role: z.enum(ROLES).default('member')
});

export const changeRoleInput = z.object({ userId: z.string().max(40), role: z.enum(ROLES) });
