import { suggestedTask } from '$lib/ledger/suggested-task';
import { openTasksInput, TASK_LIMITS } from '$lib/schemas/task-input';
import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { refuseTyped } from '$lib/server/http/task-form';
import { typedIn } from '$lib/server/http/typed-in';
import { ledgerRows } from '$lib/server/services/claims/ledger-rows';
import { showClaim } from '$lib/server/services/claims/show-claim';
import { parseInput } from '$lib/server/services/parse-input';
import { openTasks } from '$lib/server/services/tasks/open-tasks';
import { peopleForTasks } from '$lib/server/services/tasks/people-for-tasks';
import { redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

/** The claims a form or an address names, each once. */
const numbersIn = (values: readonly unknown[]): number[] =>
	[...new Set(values.map(String))].filter((text) => /^[1-9]\d{0,8}$/.test(text)).map(Number);

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'maintainer');
	const asked = numbersIn(event.url.searchParams.getAll('claims'));
	const claims = await answering(() => ledgerRows(ctx, asked.slice(0, TASK_LIMITS.claims)));
	const [first] = claims;
	const single = first && claims.length === 1 ? await showClaim(ctx, first.number) : null;
	const kinds = new Set(
		claims.map(({ verdict, disputed }) =>
			suggestedTask(verdict, single?.confirmed ?? false, disputed)
		)
	);
	return {
		claims,
		/** Named in the address, and none of the group's. */
		missing: asked.filter((number) => !claims.some((claim) => claim.number === number)),
		people: await peopleForTasks(ctx.db.read, ctx.group.id),
		kind: kinds.size === 1 ? ([...kinds][0] ?? 'recompute') : 'recompute'
	};
};

export const actions: Actions = {
	open: async (event) => {
		const ctx = await requireRole(event, 'maintainer');
		const data = await event.request.formData();
		const typed = typedIn(data);
		let numbers: number[];
		try {
			const claims = numbersIn(data.getAll('claims'));
			({ numbers } = await openTasks(ctx, parseInput(openTasksInput, { ...typed, claims })));
		} catch (thrown) {
			return refuseTyped('open', thrown, typed);
		}
		const [first] = numbers;
		const list = `/g/${ctx.group.slug}/tasks`;
		redirect(
			303,
			numbers.length > 1 || !first
				? `${list}?sort=newest&opened=${numbers.join(',')}`
				: `${list}/${first}`
		);
	}
};
