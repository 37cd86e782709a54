/** Crossref's own pattern for DOIs; it holds for 99.3 % of those registered, and nothing else is safe in a link. */
const DOI = /^10\.\d{4,9}\/[-._;()/:a-z0-9]+$/;

/** A DOI in lower case without resolver, prefix or closing punctuation; null when it is none. */
export function normaliseDoi(text: string): string | null {
	const bare = text
		.trim()
		.toLowerCase()
		.replace(/^(https?:\/\/)?(dx\.|www\.)?doi\.org\//, '')
		.replace(/^doi:\s*/, '')
		.replace(/[.,;]+$/, '');
	return DOI.test(bare) ? bare : null;
}

const ARXIV_NEW = /^(\d{2})(\d{2})\.(\d{4,5})(v[1-9]\d?)?$/;
const ARXIV_OLD = /^[a-z-]+(\.[a-z]{2})?\/(\d{2})(\d{2})\d{3}(v[1-9]\d?)?$/;

/**
 * An arXiv identifier, version kept: `YYMM.NNNN` until 1412, `YYMM.NNNNN` since 1501, or the old
 * `archive/YYMMNNN`. Null when it is none.
 */
export function normaliseArxiv(text: string): string | null {
	const bare = text
		.trim()
		.toLowerCase()
		.replace(/^https?:\/\/arxiv\.org\/(abs|pdf)\//, '')
		.replace(/^10\.48550\/arxiv\./, '')
		.replace(/^arxiv:\s*/, '')
		.replace(/\.pdf$/, '');
	const recent = ARXIV_NEW.exec(bare);
	if (recent) {
		const [, year = '', month = '', number = ''] = recent;
		const expected = Number(year) >= 15 ? 5 : 4;
		const first = Number(year) > 7 || (Number(year) === 7 && Number(month) >= 4);
		return validMonth(month) && number.length === expected && first ? bare : null;
	}
	const old = ARXIV_OLD.exec(bare);
	if (!old || !validMonth(old[3] ?? '')) return null;
	// Subject classes are written in capitals: math.CA/0611800.
	return bare.replace(/\.([a-z]{2})\//, (_, area: string) => `.${area.toUpperCase()}/`);
}

const validMonth = (month: string) => Number(month) >= 1 && Number(month) <= 12;
