import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { ServiceError } from '../../errors';
import { changeClaim } from './change-claim';
import { findClaim, type ClaimRow } from './find-claim';

const wrong = (message: string) => new ServiceError('invalid', message, [{ field: 'by', message }]);

/** Points from a claim to the one that takes its place, for instance a tighter bound. */
export async function supersedeClaim(
	ctx: GroupContext,
	number: number,
	byNumber: number
): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'supersede-claim',
		audit: 'claim.superseded',
		refusal: 'Only who entered a claim and maintainers may mark it as superseded.',
		async change(tx, { id, state }) {
			if (state === 'withdrawn') throw wrong('A withdrawn claim can’t be superseded.');
			const by = await findOther(tx, ctx, byNumber);
			if (by.id === id) throw wrong('A claim can’t supersede itself.');
			// Only an active claim takes another's place: so there are no circles.
			if (by.state !== 'active') throw wrong(`Claim ${byNumber} is not active itself.`);
			return { state: 'superseded', supersededById: by.id };
		}
	});
}

async function findOther(tx: Transaction, ctx: GroupContext, number: number): Promise<ClaimRow> {
	try {
		return await findClaim(tx, ctx, number);
	} catch (thrown) {
		if (!(thrown instanceof ServiceError) || thrown.code !== 'not-found') throw thrown;
		const named = Number.isSafeInteger(number) ? ` ${number}` : ' of that number';
		throw wrong(`There is no claim${named} in this group.`);
	}
}
