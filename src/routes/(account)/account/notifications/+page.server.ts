import type { Delivery, NotificationKind } from '$lib/ledger/notifications';
import { NOTIFICATION_KINDS } from '$lib/ledger/notifications';
import { requireUser } from '$lib/server/auth/guards';
import { failWith } from '$lib/server/http/action-error';
import {
	chooseDelivery,
	notificationChoices
} from '$lib/server/services/notifications/choose-delivery';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = requireUser(event);
	return { choices: await notificationChoices(ctx), email: ctx.actor.email };
};

export const actions: Actions = {
	save: async (event) => {
		const ctx = requireUser(event);
		const data = await event.request.formData();
		const given = NOTIFICATION_KINDS.filter((kind) => data.has(kind));
		try {
			// The service checks each value.
			await chooseDelivery(
				ctx,
				Object.fromEntries(given.map((kind) => [kind, data.get(kind)])) as Partial<
					Record<NotificationKind, Delivery>
				>
			);
		} catch (thrown) {
			return failWith(thrown);
		}
		return { saved: true };
	}
};
