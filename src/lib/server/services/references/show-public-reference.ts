import { and, asc, eq } from 'drizzle-orm';
import type { LedgerRow, PublicReferencePage } from '../../../schemas/views';
import type { Context } from '../../context';
import { claims, references } from '../../db/schema';
import { ServiceError } from '../../errors';
import { noticesOf } from '../claim-notices/notices-of';
import { publicNotices } from '../claim-notices/public-notices';
import { claimRows, selectClaimRows } from '../claims/claim-rows';
import { isPublicClaim } from '../inequalities/visibility';
import { publicReference } from './public-reference';
import { referenceView } from './reference-view';

/**
 * A paper with the public claims taken from it.
 * @throws ServiceError not-found without one, as if there were no such paper
 */
export async function showPublicReference(ctx: Context, id: string): Promise<PublicReferencePage> {
	const { read } = ctx.db;
	const [row] = await read.select().from(references).where(eq(references.id, id));
	const selected = await selectClaimRows(
		read,
		and(eq(claims.referenceId, id), isPublicClaim)
	).orderBy(asc(claims.quantity), asc(claims.createdAt));
	if (!row || selected.length === 0) {
		throw new ServiceError('not-found', 'There is no such public paper.');
	}
	const paper = publicReference(referenceView(row));
	const notices = [];
	for (const { claim } of selected) notices.push(...(await noticesOf(read, claim.id)));
	// Fields are listed, not taken away: what is added to the group's view stays private.
	return {
		id: paper.id,
		title: paper.title,
		short: paper.short,
		source: paper.source,
		formatted: paper.formatted,
		year: paper.year,
		doi: paper.doi,
		arxiv: paper.arxiv,
		bibtex: paper.bibtex,
		cslJson: paper.cslJson,
		notices: publicNotices(notices),
		claimRows: (await claimRows(read, selected, ctx.now())).map(publicRow)
	};
}

/** How many claims a group has is its own business. */
const NO_NUMBER = 0;

function publicRow(row: LedgerRow): LedgerRow {
	return {
		id: row.id,
		number: NO_NUMBER,
		subject: row.subject,
		quantityLabel: row.quantityLabel,
		relation: row.relation,
		printed: row.printed,
		printedHtml: row.printedHtml,
		verdict: row.verdict,
		recomputedBy: row.recomputedBy,
		stations: row.stations,
		progress: row.progress,
		reference: row.reference,
		state: row.state,
		visibility: row.visibility,
		notices: row.notices,
		disputed: false,
		task: null,
		wantsTask: false
	};
}
