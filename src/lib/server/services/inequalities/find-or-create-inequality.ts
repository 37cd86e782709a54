import { and, eq, isNotNull } from 'drizzle-orm';
import {
	familyFunctional,
	familyLatex,
	type FamilySpec
} from '../../../nonlocality/scenario/families';
import type { Functional } from '../../../nonlocality/scenario/functional';
import { termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import type { Transaction } from '../../db/client';
import { inequalities, recomputations } from '../../db/schema';
import { newId } from '../../ids';
import { queueRecomputation } from '../recomputations/queue-recomputation';
import { stationProblems } from '../recomputations/station-problems';
import {
	canonicalSubject,
	mapBetween,
	type CanonicalSubject,
	type MapText
} from './canonical-subject';
import { familyOfDigest, namesOf } from './catalogue';
import { scenarioLabel } from './scenario-words';

/** A functional with its canonical place; `family` when it was entered as a member of one. */
export interface PlacedSubject {
	readonly functional: Functional;
	readonly latex: string;
	readonly family: FamilySpec | null;
	readonly place: CanonicalSubject;
}

export interface FoundInequality {
	readonly id: string;
	readonly outputs: readonly (readonly number[])[];
	readonly terms: (typeof inequalities.$inferSelect)['terms'];
	/** value as entered = scale * value of the representative + shift. */
	readonly map: MapText;
	readonly isNew: boolean;
}

/** The row of an equivalence class, made at its first use; its representative fixes all values. */
export async function findOrCreateInequality(
	tx: Transaction,
	subject: PlacedSubject,
	now: Date
): Promise<FoundInequality> {
	const { place } = subject;
	const [known] = await tx
		.select()
		.from(inequalities)
		.where(
			and(eq(inequalities.digestVersion, place.version), eq(inequalities.digest, place.digest))
		);
	if (known) {
		const { id, outputs, terms } = known;
		return { id, outputs, terms, map: mapBetween(known, place), isNew: false };
	}
	const row = newRow(subject, now);
	await tx.insert(inequalities).values(row);
	const { id, outputs, terms } = row;
	return { id, outputs, terms, map: mapBetween(row, place), isNew: true };
}

function newRow({ functional, latex, family, place }: PlacedSubject, now: Date) {
	const recognised = familyOfDigest(place.digest);
	const spec = recognised ?? family;
	// A family's own form stands for it, whatever form somebody entered first.
	const form = recognised ? familyFunctional(recognised) : functional;
	const { scale, shift } = recognised ? canonicalSubject(form) : place;
	return {
		id: newId(now.getTime()),
		digest: place.digest,
		digestVersion: place.version,
		numerical: place.numerical,
		...(spec ? namesOf(spec) : { name: null, nameLatex: null }),
		outputs: form.scenario.outputs.map((party) => [...party]),
		terms: termsOfFunctional(form),
		latex: spec ? familyLatex(spec) : latex,
		scale,
		shift,
		parties: form.scenario.outputs.length,
		scenario: scenarioLabel(form.scenario.outputs),
		createdAt: now
	};
}

/**
 * Queues what is missing of an inequality's stations. One run is one station for good: a later
 * budget makes another problem of it, but no reason to run it again.
 */
export async function queueStations(
	tx: Transaction,
	inequality: Pick<FoundInequality, 'id' | 'outputs' | 'terms'>,
	groupId: string | null,
	seconds: number,
	now: Date
): Promise<void> {
	const there = await tx
		.select({ station: recomputations.station })
		.from(recomputations)
		.where(and(eq(recomputations.inequalityId, inequality.id), isNotNull(recomputations.station)));
	const known = new Set(there.map(({ station }) => station));
	for (const { station, problem } of stationProblems(inequality, seconds)) {
		if (known.has(station)) continue;
		const queued = { problem, inequalityId: inequality.id, groupId, station };
		await queueRecomputation(tx, queued, now, { again: false });
	}
}
