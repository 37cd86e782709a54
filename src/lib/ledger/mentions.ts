/** Handles: what stands behind an `@` to mention a member of a group. */

export interface Member {
	readonly id: string;
	readonly name: string;
}

export interface Handle {
	/** Lower-case letters, digits and hyphens. */
	readonly handle: string;
	readonly id: string;
	readonly name: string;
	/** The handle that is offered; a person may have a longer one too. */
	readonly offered: boolean;
}

/** A letter or digit must not stand before the `@` (an e-mail address), nor anything of an address. */
const MENTION = /(?<![\p{L}\p{N}\p{M}_@./+-])@([\p{L}\p{N}\p{M}]+(?:-[\p{L}\p{N}\p{M}]+)*)/gu;

/** `wren-aldous` of `Wren Aldous`; accents are dropped so that every keyboard can type it. */
export function handleOf(name: string): string {
	return name
		.normalize('NFKD')
		.replace(/\p{M}+/gu, '')
		.toLowerCase()
		.replace(/[^\p{L}\p{N}]+/gu, '-')
		.replace(/^-+|-+$/g, '');
}

/**
 * The handles of a group's members: the whole name, with a number behind it where two have the
 * same, and the first name alone where only one member has it.
 * @param members in an order that stays, so that numbers do too
 */
export function handlesOf(members: readonly Member[]): readonly Handle[] {
	const taken = new Map<string, Member>();
	const whole = members.map((member) => {
		const base = handleOf(member.name) || 'member';
		let handle = base;
		for (let n = 2; taken.has(handle); n++) handle = `${base}-${n}`;
		taken.set(handle, member);
		return { member, handle };
	});
	const firstNames = members.map(({ name }) => handleOf(name).split('-')[0] ?? '');
	return whole.flatMap(({ member: { id, name }, handle }, i) => {
		const first = firstNames[i] ?? '';
		const alone =
			first !== '' &&
			first !== handle &&
			!taken.has(first) &&
			firstNames.filter((other) => other === first).length === 1;
		return [
			...(alone ? [{ handle: first, id, name, offered: true }] : []),
			{ handle, id, name, offered: !alone }
		];
	});
}

export interface Mention extends Handle {
	/** Where the `@` stands in the text, and where the handle ends. */
	readonly start: number;
	readonly end: number;
}

/** The mentions in a plain text, in its order; the longest handle that fits counts. */
export function findMentions(text: string, handles: readonly Handle[]): readonly Mention[] {
	const known = new Map(handles.map((handle) => [handle.handle, handle]));
	return [...text.matchAll(MENTION)].flatMap((match) => {
		const found = longestHandle(match[1] ?? '', known);
		if (!found) return [];
		const end = match.index + 1 + found.typed.length;
		// `@wren@elsewhere.example` is an address somewhere else.
		if (text[end] === '@') return [];
		return [{ ...found.handle, start: match.index, end }];
	});
}

/** What was typed as mentions and names nobody, each once, as it was typed. */
export function unknownMentions(text: string, handles: readonly Handle[]): readonly string[] {
	const known = new Map(handles.map((handle) => [handle.handle, handle]));
	const unknown = [...text.matchAll(MENTION)].flatMap((match) => {
		const typed = match[1] ?? '';
		const elsewhere = text[match.index + 1 + typed.length] === '@';
		return elsewhere || longestHandle(typed, known) ? [] : [`@${typed}`];
	});
	return [...new Set(unknown)];
}

/** `@wren-aldous-style` mentions wren-aldous: what is typed may go on with a hyphen. */
function longestHandle(
	typed: string,
	known: ReadonlyMap<string, Handle>
): { handle: Handle; typed: string } | null {
	const parts = typed.split('-');
	for (let length = parts.length; length > 0; length--) {
		const part = parts.slice(0, length).join('-');
		const handle = known.get(handleOf(part));
		if (handle) return { handle, typed: part };
	}
	return null;
}

/** The mention that is being typed before the caret: where its `@` stands, and what follows it. */
export function mentionTyped(
	text: string,
	caret: number
): { readonly start: number; readonly typed: string } | null {
	const match = /(?<![\p{L}\p{N}\p{M}_@./+-])@([\p{L}\p{N}\p{M}-]*)$/u.exec(text.slice(0, caret));
	return match ? { start: match.index, typed: match[1] ?? '' } : null;
}

const MOST_SUGGESTIONS = 6;

/** The handles that start as typed, or whose person has a name that does. */
export function suggestHandles<H extends Pick<Handle, 'handle' | 'name'>>(
	handles: readonly H[],
	typed: string
): readonly H[] {
	const start = handleOf(typed);
	return handles
		.filter(({ handle, name }) => `-${handle}-${handleOf(name)}`.includes(`-${start}`))
		.slice(0, MOST_SUGGESTIONS);
}
