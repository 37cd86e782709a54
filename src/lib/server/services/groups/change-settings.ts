import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import { may } from '../../../ledger/policy';
import { groupSettingsInput } from '../../../schemas/group';
import type { GroupContext } from '../../context';
import { groups } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';
import { requireStill } from './membership';
import { moveAddress } from './move-address';
import { loadSettings, settingsVersion, type GroupSettings } from './show-settings';

const REFUSAL = 'Only maintainers and owners change the settings.';
const ADDRESS_REFUSAL = 'Only owners change the address.';

/**
 * Changes name, description, budget and (owners) the address, all or nothing.
 * @returns the group's address afterwards
 * @throws ServiceError invalid; forbidden; conflict (the address is taken, or somebody changed the
 *   settings since the form's version)
 */
export async function changeSettings(
	ctx: GroupContext,
	input: z.input<typeof groupSettingsInput>
): Promise<{ readonly slug: string }> {
	if (!may(ctx.role, 'change-settings')) throw new ServiceError('forbidden', REFUSAL);
	const { version, slug, budgetSeconds, ...words } = parseInput(groupSettingsInput, input);
	return ctx.db.write(async (tx) => {
		await requireStill(tx, ctx, 'change-settings', REFUSAL);
		const before = await loadSettings(tx, ctx.group.id);
		const after: GroupSettings = {
			...words,
			budgetSeconds: budgetSeconds === '' ? null : Number(budgetSeconds),
			slug: slug ?? before.slug
		};
		if (version !== settingsVersion(before)) {
			throw new ServiceError('conflict', changedMeanwhile(before));
		}
		const changed = KEYS.filter((key) => before[key] !== after[key]);
		if (changed.length === 0) return { slug: before.slug };
		if (after.slug !== before.slug) {
			await requireStill(tx, ctx, 'change-address', ADDRESS_REFUSAL);
			await moveAddress(tx, ctx.group.id, before.slug, after.slug);
		}
		await tx.update(groups).set(after).where(eq(groups.id, ctx.group.id));
		const only = (settings: GroupSettings) =>
			Object.fromEntries(changed.map((key) => [key, settings[key]]));
		await recordAudit(tx, ctx, {
			action: 'group.settings-changed',
			entity: 'group',
			entityId: ctx.group.id,
			groupId: ctx.group.id,
			before: only(before),
			after: only(after)
		});
		return { slug: after.slug };
	});
}

const KEYS = ['name', 'description', 'budgetSeconds', 'slug'] as const;

function changedMeanwhile({ name, description, budgetSeconds, slug }: GroupSettings): string {
	const budget = budgetSeconds === null ? 'the site’s setting' : `${budgetSeconds} s`;
	return (
		'Somebody changed the settings since you opened this page. They are now: ' +
		`name “${name}”, description “${description}”, computing time ${budget}, address /g/${slug}. ` +
		'What you typed is still here; save again to put it in their place.'
	);
}
