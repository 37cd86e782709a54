import { and, eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { references } from '../../db/schema';
import { newId } from '../../ids';
import type { ParsedReference } from '../../references/parse-bibtex';

/**
 * The group's paper for a parsed entry: the one it has (same DOI; without one, same title, authors
 * and year), or a new row. Parse before the transaction: that takes a while, this does not.
 */
export async function addReference(
	tx: Transaction,
	ctx: GroupContext,
	bibtex: string,
	parsed: ParsedReference
): Promise<{ id: string; isNew: boolean }> {
	const same = parsed.doi
		? eq(references.doi, parsed.doi)
		: and(eq(references.title, parsed.title), eq(references.source, parsed.source));
	const [known] = await tx
		.select({ id: references.id })
		.from(references)
		.where(and(eq(references.groupId, ctx.group.id), same));
	if (known) return { id: known.id, isNew: false };
	const id = newId();
	await tx.insert(references).values({
		id,
		groupId: ctx.group.id,
		bibtex,
		csl: parsed.csl,
		title: parsed.title,
		short: parsed.short,
		source: parsed.source,
		formatted: parsed.formatted,
		year: parsed.year,
		doi: parsed.doi,
		arxiv: parsed.arxiv,
		createdBy: ctx.actor.id,
		createdAt: ctx.now()
	});
	return { id, isNew: true };
}
