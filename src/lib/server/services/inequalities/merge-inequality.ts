import { and, eq, like } from 'drizzle-orm';
import { parseCoefficient } from '../../../nonlocality/exact/expression';
import type { Transaction } from '../../db/client';
import {
	attachedCertificates,
	claims,
	comments,
	inequalities,
	inequalityRedirects,
	submissions
} from '../../db/schema';
import { deriveClaim } from '../claims/derive-claim';
import { rekeyed } from '../claims/quantity-key';
import { carryFinding } from '../submissions/carry-finding';
import { readMap, type AffineMap } from './affine';
import { mapBetween, type CanonicalSubject, type MapText } from './canonical-subject';
import { carryRuns } from './carry-runs';
import type { InequalityRecord } from './inequality-rows';

/** value = outer.scale * (inner.scale * x + inner.shift) + outer.shift. */
function composeMaps(outer: MapText, inner: MapText): MapText {
	return {
		scale: parseCoefficient(`(${outer.scale})*(${inner.scale})`).text,
		shift: parseCoefficient(`(${outer.scale})*(${inner.shift})+(${outer.shift})`).text
	};
}

/**
 * Moves everything that refers to an inequality to an equivalent one, so that every claim keeps its
 * meaning: its map to the representative is composed with the map between the two. The old id then
 * redirects, and every claim on the kept one is judged from all that is known of it now.
 * @param place where the old one's representative belongs, over the kept one's canonical form
 * @throws NotationError, NotationLimitError when a map is too long a number to be written
 */
export async function mergeInequality(
	tx: Transaction,
	old: InequalityRecord,
	kept: InequalityRecord,
	place: CanonicalSubject,
	now: Date
): Promise<void> {
	const back = mapBetween(kept, place); // old = scale * kept + shift
	const forth = readMap(mapBetween(place, kept));
	const isExact =
		forth.scale.low.equals(forth.scale.high) && forth.shift.low.equals(forth.shift.high);
	// Irrational coefficients meet by their digits, which carries no proof over.
	const map = isExact && !place.numerical ? forth : null;
	await moveClaims(tx, old.id, kept.id, back);
	await carryRuns(tx, old, kept, map);
	await moveFindings(tx, old, kept, map);
	await tx
		.update(comments)
		.set({ subjectId: kept.id })
		.where(and(eq(comments.subject, 'inequality'), eq(comments.subjectId, old.id)));
	await redirect(tx, old, kept.id, back, now);
	await tx.delete(inequalities).where(eq(inequalities.id, old.id));
	const touched = await tx
		.select({ id: claims.id })
		.from(claims)
		.where(eq(claims.inequalityId, kept.id));
	for (const { id } of touched) await deriveClaim(tx, id, now);
}

async function moveClaims(
	tx: Transaction,
	oldId: string,
	keptId: string,
	back: MapText
): Promise<void> {
	const moved = await tx
		.select({ id: claims.id, scale: claims.scale, shift: claims.shift })
		.from(claims)
		.where(eq(claims.inequalityId, oldId));
	for (const { id, ...own } of moved) {
		await tx
			.update(claims)
			.set({ inequalityId: keptId, ...composeMaps(own, back) })
			.where(eq(claims.id, id));
	}
	// What people handed in counts while its claim is about the same: it still is.
	const keyed = await tx
		.select({ id: submissions.id, quantityKey: submissions.quantityKey })
		.from(submissions)
		.where(like(submissions.quantityKey, `[["${oldId}",%`));
	for (const { id, quantityKey } of keyed) {
		const key = rekeyed(quantityKey, (map) => ({ id: keptId, ...composeMaps(map, back) }));
		await tx.update(submissions).set({ quantityKey: key }).where(eq(submissions.id, id));
	}
}

/** What was proved by certificates that people handed in, said of the kept representative. */
async function moveFindings(
	tx: Transaction,
	old: InequalityRecord,
	kept: InequalityRecord,
	map: AffineMap | null
): Promise<void> {
	if (!map) return;
	const about = JSON.stringify([old.outputs, old.terms]);
	for (const table of [submissions, attachedCertificates]) {
		const rows = await tx
			.select({ id: table.id, finding: table.finding })
			.from(table)
			.innerJoin(claims, eq(claims.id, table.claimId))
			.where(eq(claims.inequalityId, kept.id));
		for (const { id, finding } of rows) {
			if (!finding) continue;
			const { outputs, terms } = finding.result.problem;
			if (JSON.stringify([outputs, terms]) !== about) continue;
			const moved = { finding: carryFinding(finding, kept, map) };
			await tx.update(table).set(moved).where(eq(table.id, id));
		}
	}
}

async function redirect(
	tx: Transaction,
	{ id, name, outputs, terms, latex }: InequalityRecord,
	keptId: string,
	back: MapText,
	now: Date
): Promise<void> {
	const before = await tx
		.select()
		.from(inequalityRedirects)
		.where(eq(inequalityRedirects.keptId, id));
	for (const { id: former, scale, shift } of before) {
		await tx
			.update(inequalityRedirects)
			.set({ keptId, ...composeMaps({ scale, shift }, back) })
			.where(eq(inequalityRedirects.id, former));
	}
	await tx
		.insert(inequalityRedirects)
		.values({ id, keptId, ...back, name, outputs, terms, latex, mergedAt: now });
}
