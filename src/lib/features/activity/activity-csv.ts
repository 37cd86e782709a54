import type { ActivityEntry } from '../../schemas/talk-views';
import { csvText } from '../csv/csv-text';

const HEADING = ['time', 'who', 'what', 'kind', 'address', 'changes', 'request'];

/** Entries as CSV with a heading; what changed field by field is empty for whoever may not see it. */
export function activityCsv(entries: readonly ActivityEntry[], origin: string): string {
	const rows = entries.map(({ at, who, text, kind, href, changes, requestId }) => [
		at,
		who ?? '',
		text,
		kind,
		href ? origin + href : '',
		changes.map(({ field, before, after }) => `${field}: ${before} -> ${after}`).join('\n'),
		requestId
	]);
	return csvText([HEADING, ...rows]);
}
