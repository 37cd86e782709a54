import { familyFunctional, familyLatex } from '../../../nonlocality/scenario/families';
import type { Database } from '../../db/client';
import { recognisedFamilies } from './catalogue';
import { findOrCreateInequality } from './find-or-create-inequality';
import { placeSubject } from './place-subject';

/**
 * Gives the recognised family members their rows, so that the search finds them before anyone has
 * entered a claim on them. Their stations are queued with the first claim.
 */
export async function ensureCatalogue(db: Database, now = new Date()): Promise<void> {
	for (const family of recognisedFamilies()) {
		const functional = familyFunctional(family);
		const place = await placeSubject(functional);
		const subject = { functional, latex: familyLatex(family), family, place };
		await db.write((tx) => findOrCreateInequality(tx, subject, now));
	}
}
