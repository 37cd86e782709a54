import type { ActivityEntry } from '../../../schemas/talk-views';
import { FIELD_WORD } from './claim-fields';
import { isId } from './names-of';
import { valueOf, type Recorded } from './recorded';

/** What stays of a long text in a list of changes. */
const LONGEST_TEXT = 600;

const WORDS: Readonly<Record<string, string>> = {
	...FIELD_WORD,
	assigneeId: 'Assignee',
	dueOn: 'Due',
	body: 'Text',
	budgetSeconds: 'Time for a recomputation, seconds',
	confirmedBy: 'Compared with the paper by',
	confirmedVersion: 'Compared version',
	slug: 'Address',
	supersededById: 'Superseded by',
	publishedBy: 'Published by',
	publishedAt: 'Published',
	valueMatches: 'Value as printed',
	locatorMatches: 'Locator as printed',
	inequalityMatches: 'Inequality as printed'
};

/** The fields that say what the row itself is, or are said by it. */
const PLUMBING: ReadonlySet<string> = new Set([
	'number',
	'subject',
	'subjectId',
	'paper',
	'bibtex'
]);

/** What an audit row changed, field by field; ids are named, and left out where they can't be. */
export function fieldChanges(
	before: Recorded,
	after: Recorded,
	named: (id: unknown) => string | null
): ActivityEntry['changes'] {
	const shown = (value: unknown): string => {
		if (value === null || value === undefined) return '';
		if (isId(value)) return named(value) ?? '';
		if (typeof value === 'string') {
			return value.length > LONGEST_TEXT ? `${value.slice(0, LONGEST_TEXT)} …` : value;
		}
		if (typeof value === 'boolean') return value ? 'yes' : 'no';
		if (Array.isArray(value)) return value.map(shown).join('; ');
		if (typeof value === 'object') {
			const parts = Object.entries(value).filter(([key]) => key !== 'id');
			return parts
				.flatMap(([key, part]) => shown(part) && `${words(key)}: ${shown(part)}`)
				.join(', ');
		}
		return String(value);
	};
	const told = (recorded: Recorded) => Object.keys(recorded).filter((key) => !PLUMBING.has(key));
	const [was, is] = [told(before), told(after)];
	// A field that only one side has did not change, unless the other side has none at all.
	const whole = was.length === 0 || is.length === 0;
	return [...new Set([...was, ...is])].flatMap((field) => {
		if (!whole && !(field in after)) return [];
		const [old, now] = [shown(valueOf(before, field)), shown(valueOf(after, field))];
		return old === now ? [] : [{ field: words(field), before: old, after: now }];
	});
}

/** `assigneeId` -> `Assignee`, `finishedAt` -> `Finished at`. */
function words(field: string): string {
	const known = WORDS[field];
	if (known) return known;
	const spaced = field
		.replace(/Id$/, '')
		.replace(/([a-z])([A-Z])/g, '$1 $2')
		.toLowerCase();
	return spaced.charAt(0).toUpperCase() + spaced.slice(1);
}
