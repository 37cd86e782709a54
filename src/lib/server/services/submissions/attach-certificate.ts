import { createHash } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { oneLine } from '../../../ledger/one-line';
import { may } from '../../../ledger/policy';
import { attachInput, type AttachInput } from '../../../schemas/attach-input';
import type { GroupContext } from '../../context';
import { attachedCertificates } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { deriveClaim } from '../claims/derive-claim';
import { findClaim } from '../claims/find-claim';
import { parseInput } from '../parse-input';
import { requireClaimAsSeen } from '../tasks/require-claim-as-seen';
import { readCertificate } from './read-certificate';

const MAY_NOT_ATTACH = 'Attaching a certificate takes the role of a member.';

/**
 * Attaches a strategy or certificate to a claim, without a task. The independent check decides at
 * once: what it accepts counts as the machine's own, what it refuses is not kept.
 * @returns what it proves, in a sentence
 * @throws ServiceError forbidden; conflict for a withdrawn claim, or the same certificate again;
 *   invalid with an issue of the field `certificate`, also where the check refuses it
 */
export async function attachCertificate(
	ctx: GroupContext,
	number: number,
	input: Partial<AttachInput>
): Promise<string> {
	if (!may(ctx.role, 'attach-certificate')) throw new ServiceError('forbidden', MAY_NOT_ATTACH);
	const { certificate, source } = parseInput(attachInput, input);
	const claim = await findClaim(ctx.db.read, ctx, number);
	if (claim.state === 'withdrawn') {
		throw new ServiceError('conflict', 'This claim is withdrawn: nothing is attached to it.');
	}
	if (!certificate.trim())
		throw refusal('Paste the result with its certificate, or choose its file.');
	const { finding, label, accepted, note } = await readCertificate(ctx, claim, certificate);
	if (!accepted) throw refusal(note);
	const sha256 = createHash('sha256').update(certificate).digest('hex');
	await ctx.db.write(async (tx) => {
		const current = await findClaim(tx, ctx, number);
		await requireClaimAsSeen(tx, current, claim.version);
		const same = and(
			eq(attachedCertificates.claimId, claim.id),
			eq(attachedCertificates.sha256, sha256)
		);
		if ((await tx.$count(attachedCertificates, same)) > 0) {
			throw new ServiceError('conflict', 'This certificate is attached already.');
		}
		const id = newId();
		await tx.insert(attachedCertificates).values({
			id,
			claimId: claim.id,
			source: oneLine(source),
			sha256,
			bytes: Buffer.byteLength(certificate),
			finding,
			attachedBy: ctx.actor.id,
			attachedAt: ctx.now(),
			certificate
		});
		await recordAudit(tx, ctx, {
			action: 'claim.certificate-attached',
			entity: 'claim',
			entityId: claim.id,
			groupId: ctx.group.id,
			before: null,
			after: { certificateId: id, label, source: oneLine(source), sha256 }
		});
		await deriveClaim(tx, claim.id, ctx.now());
	});
	return note;
}

const refusal = (message: string) =>
	new ServiceError('invalid', message, [{ field: 'certificate', message }]);
