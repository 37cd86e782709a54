/** An entry of CSL-JSON as Citation.js makes it; fields are checked where they are read. */
export type CslEntry = Record<string, unknown>;

interface Name {
	readonly family: string;
	readonly given: string;
}

function namesOf(entry: CslEntry, role: 'author' | 'editor'): Name[] {
	const list: unknown = entry[role];
	if (!Array.isArray(list)) return [];
	return list.flatMap((person: unknown): Name[] => {
		if (typeof person !== 'object' || person === null) return [];
		const part = (key: string): string => {
			const value: unknown = Reflect.get(person, key);
			return typeof value === 'string' ? value.trim() : '';
		};
		const family = [part('non-dropping-particle'), part('family') || part('literal')]
			.filter(Boolean)
			.join(' ');
		return family ? [{ family, given: part('given') }] : [];
	});
}

function peopleOf(entry: CslEntry): Name[] {
	const authors = namesOf(entry, 'author');
	return authors.length > 0 ? authors : namesOf(entry, 'editor');
}

export function yearOf(entry: CslEntry): number | null {
	const issued: unknown = entry.issued;
	if (typeof issued !== 'object' || issued === null) return null;
	const parts: unknown = Reflect.get(issued, 'date-parts');
	const year: unknown = Array.isArray(parts) && Array.isArray(parts[0]) ? parts[0][0] : null;
	const number = Number(year);
	return year !== null && Number.isInteger(number) ? number : null;
}

/** `Arden`, `Arden & Voss`, `Ferro et al.`; null without a name. `and others` counts as more. */
export function formattedName(entry: CslEntry): string | null {
	const [first, second, ...more] = peopleOf(entry);
	if (!first) return null;
	if (!second) return first.family;
	if (more.length > 0 || /^others$/i.test(second.family)) return `${first.family} et al.`;
	return `${first.family} & ${second.family}`;
}

/** `Arden & Voss 2004`. */
export function shortLabel(entry: CslEntry): string {
	const year = yearOf(entry);
	return [formattedName(entry) ?? 'Unnamed', year === null ? 'n.d.' : String(year)].join(' ');
}

const initials = (given: string): string =>
	given
		.split(/[\s.]+/)
		.filter(Boolean)
		.map((part) =>
			part
				.split('-')
				.map((piece) => `${[...piece][0] ?? ''}.`)
				.join('-')
		)
		.join(' ');

const MOST_NAMES = 4;

/** `S. Lindqvist, J. Invented Phys. 12, 345 (2011)`: everything but the title. */
export function sourceLine(entry: CslEntry): string {
	const people = peopleOf(entry).filter(({ family }) => !/^others$/i.test(family));
	const names = people
		.slice(0, MOST_NAMES)
		.map(({ family, given }) => [initials(given), family].filter(Boolean).join(' '));
	if (people.length > MOST_NAMES) names.push('et al.');
	const text = (key: string): string => {
		const value = entry[key];
		return typeof value === 'string' || typeof value === 'number' ? String(value) : '';
	};
	const place = [text('container-title') || text('publisher'), text('volume')]
		.filter(Boolean)
		.join(' ');
	const pages = text('page').replace(/-+/g, '–') || text('number');
	const year = yearOf(entry);
	return [...names, place, pages].filter(Boolean).join(', ') + (year === null ? '' : ` (${year})`);
}
