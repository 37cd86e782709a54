import { and, asc, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { AttachedCertificateView } from '../../../schemas/attach-input';
import type { GroupContext } from '../../context';
import { attachedCertificates, claims, users } from '../../db/schema';
import { ServiceError } from '../../errors';
import { mapSides, readMap, showSides } from '../inequalities/affine';
import { findInequality } from '../inequalities/inequality-rows';
import { problemLabel } from '../recomputations/problem-label';

/** The certificates attached to a claim of the group, oldest first, without their texts. */
export async function listAttached(
	ctx: GroupContext,
	claimId: string
): Promise<readonly AttachedCertificateView[]> {
	const { read } = ctx.db;
	const rows = await read
		.select({
			id: attachedCertificates.id,
			source: attachedCertificates.source,
			bytes: attachedCertificates.bytes,
			finding: attachedCertificates.finding,
			at: attachedCertificates.attachedAt,
			by: users.name,
			inequalityId: claims.inequalityId,
			scale: claims.scale,
			shift: claims.shift
		})
		.from(attachedCertificates)
		.innerJoin(claims, eq(claims.id, attachedCertificates.claimId))
		.innerJoin(users, eq(users.id, attachedCertificates.attachedBy))
		.where(and(eq(claims.id, claimId), eq(claims.groupId, ctx.group.id)))
		.orderBy(asc(attachedCertificates.attachedAt), asc(attachedCertificates.id));
	const inequalityId = rows[0]?.inequalityId ?? null;
	const about = inequalityId === null ? null : await findInequality(read, inequalityId);
	const subject = JSON.stringify([about?.outputs, about?.terms]);
	return rows.map(({ finding, at, id, source, bytes, by, scale, shift }) => {
		const { problem } = finding.result;
		const current = JSON.stringify([problem.outputs, problem.terms]) === subject;
		const { check } = finding;
		const sides = check?.checked ? showSides(mapSides(readMap({ scale, shift }), check)) : null;
		return {
			id,
			label: problemLabel(problem).replace(/^See-saw/, 'Explicit strategy'),
			source,
			by,
			at: at.toISOString(),
			bytes,
			proves: current && sides ? provedWords(sides) : null,
			method: check?.checked ? check.method : ''
		};
	});
}

function provedWords({ lower, upper }: { lower: string | null; upper: string | null }): string {
	if (lower !== null && lower === upper) return `exactly ${lower}`;
	const sides = [lower !== null && `at least ${lower}`, upper !== null && `at most ${upper}`];
	return sides.filter(Boolean).join(' and ');
}

/** @throws ServiceError not-found, also for one of another group */
export async function downloadAttached(
	ctx: GroupContext,
	id: string
): Promise<{ readonly name: string; readonly text: string }> {
	if (!may(ctx.role, 'view-group')) throw new ServiceError('forbidden', 'This is the group’s own.');
	const [row] = await ctx.db.read
		.select({ text: attachedCertificates.certificate, number: claims.number })
		.from(attachedCertificates)
		.innerJoin(claims, eq(claims.id, attachedCertificates.claimId))
		.where(and(eq(attachedCertificates.id, id), eq(claims.groupId, ctx.group.id)));
	if (!row) throw new ServiceError('not-found', 'There is no such certificate here.');
	return { name: `${ctx.group.slug}-claim-${row.number}-${id}.json`, text: row.text };
}
