import type { ReferenceView } from '../../../schemas/views';
import type { references } from '../../db/schema';

export function referenceView(row: typeof references.$inferSelect): ReferenceView {
	return {
		id: row.id,
		title: row.title,
		short: row.short,
		source: row.source,
		formatted: row.formatted,
		year: row.year,
		doi: row.doi,
		arxiv: row.arxiv,
		bibtex: row.bibtex,
		cslJson: JSON.stringify([{ ...row.csl, id: row.id }], null, 2)
	};
}
