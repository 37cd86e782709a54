import { and, eq, inArray, isNotNull, or } from 'drizzle-orm';
import { mailWorthy, type Verdict } from '../../../ledger/verdict';
import type { Transaction } from '../../db/client';
import { claims, recomputations, verdicts } from '../../db/schema';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { stationsDone } from '../inequalities/stations-view';
import {
	dropWaitingMails,
	releaseWaitingMails,
	tellDiscrepancy,
	tellSettled
} from '../notifications/verdict-notices';
import { contradictSubmission } from '../tasks/contradict-submission';
import { findingsCache, type FindingsOf } from './findings';
import { judgeClaim, type JudgedClaim } from './judge-claim';

/** The product itself, in the audit. */
const product = (now: Date) => ({ actor: null, requestId: 'derived', now: () => now });

/**
 * Judges a claim again from all that is known now, in the transaction of whatever changed: stores
 * the verdict, its history when it changed for a reader, and tells people when it turned to a
 * discrepancy or agrees after one. The only place where a verdict is written.
 */
export async function deriveClaim(tx: Transaction, id: string, now: Date): Promise<void> {
	const [claim] = await tx.select().from(claims).where(eq(claims.id, id));
	if (claim) await derive(tx, claim, now, findingsCache(tx));
}

/**
 * Judges every claim that a recomputation touches: those on its inequality and those that asked
 * for it.
 * @param ownOnly only those that asked for it (it has started; nothing is known yet)
 */
export async function deriveTouchedClaims(
	tx: Transaction,
	recomputationId: string,
	now: Date,
	{ ownOnly = false } = {}
): Promise<void> {
	const [row] = await tx
		.select({ inequalityId: recomputations.inequalityId, station: recomputations.station })
		.from(recomputations)
		.where(eq(recomputations.id, recomputationId));
	if (!row) return;
	const own = or(
		eq(claims.recomputationId, recomputationId),
		eq(claims.otherBaseRecomputationId, recomputationId)
	);
	const onIt = row.inequalityId === null ? undefined : eq(claims.inequalityId, row.inequalityId);
	// A station speaks to every group; what a claim asked for only to the groups that asked.
	const asking = tx.select({ id: claims.groupId }).from(claims).where(own);
	const heard = row.station === null ? and(onIt, inArray(claims.groupId, asking)) : onIt;
	const touched = await tx
		.select()
		.from(claims)
		.where(onIt && !ownOnly ? or(own, heard) : own);
	const findings = findingsCache(tx);
	for (const claim of touched) await derive(tx, claim, now, findings);
	if (!ownOnly && row.inequalityId && (await areStationsDone(tx, row.inequalityId))) {
		await releaseWaitingMails(
			tx,
			touched.map(({ id }) => id),
			now
		);
	}
}

async function derive(
	tx: Transaction,
	claim: JudgedClaim,
	now: Date,
	findings: FindingsOf
): Promise<void> {
	const { verdict, contradicted } = await judgeClaim(tx, claim, findings);
	if (claim.state !== 'withdrawn') {
		for (const { submissionId, why } of contradicted) {
			await contradictSubmission(tx, product(now), submissionId, why);
		}
	}
	const before = claim.verdict;
	if (JSON.stringify(before) === JSON.stringify(verdict)) return;
	await tx.update(claims).set({ verdict, status: verdict.status }).where(eq(claims.id, claim.id));
	const turned = mailWorthy(verdict) && !mailWorthy(before);
	if (!turned && changeKey(before) === changeKey(verdict)) return;
	const verdictId = newId();
	await tx.insert(verdicts).values({
		id: verdictId,
		claimId: claim.id,
		claimVersion: claim.version,
		status: verdict.status,
		verdict,
		at: now
	});
	if (before.status !== verdict.status) {
		await recordAudit(tx, product(now), {
			action: 'claim.judged',
			entity: 'claim',
			entityId: claim.id,
			groupId: claim.groupId,
			before: { status: before.status },
			after: {
				status: verdict.status,
				reason: verdict.reason,
				worth: verdict.enclosure?.worth ?? null
			}
		});
	}
	if (!mailWorthy(verdict)) await dropWaitingMails(tx, claim.id);
	if (claim.state !== 'active') return;
	if (turned) {
		const done = claim.inequalityId === null || (await areStationsDone(tx, claim.inequalityId));
		await tellDiscrepancy(tx, claim, verdictId, now, done);
	} else if (verdict.status === 'agreement') await tellSettled(tx, claim, verdictId, now);
}

/** What a reader would call a change: not that a run was queued or started, nor one more digit. */
function changeKey({ status, reasonCode, diagnosis, enclosure, contradicting }: Verdict): string {
	const reason = reasonCode === 'not-run' || reasonCode === 'running' ? 'waiting' : reasonCode;
	const byPeople = [
		enclosure?.worth === 'person',
		contradicting?.map((found) => found.submissionId)
	];
	return JSON.stringify([
		status,
		reason,
		diagnosis.map(({ kind, value }) => [kind, value]),
		byPeople
	]);
}

async function areStationsDone(tx: Transaction, inequalityId: string): Promise<boolean> {
	const rows = await tx
		.select({ state: recomputations.state, renewal: recomputations.renewal })
		.from(recomputations)
		.where(and(eq(recomputations.inequalityId, inequalityId), isNotNull(recomputations.station)));
	return stationsDone(rows);
}
