import { emailAddress } from './account';

/** A list that is pasted is checked by eye before it is sent. */
export const MOST_ADDRESSES = 20;
/** Twenty of the longest addresses with names beside them. */
export const LONGEST_ADDRESS_LIST = 8_000;

export interface AddressList {
	/** In lower case, each once, in the order typed. */
	readonly addresses: readonly string[];
	/** What is none, as typed. */
	readonly wrong: readonly string[];
}

/**
 * Addresses separated by commas, semicolons, spaces or lines; `Wren Adeyo <wren@reading.example>`
 * as mail programmes copy it counts as the address in the brackets. What is longer than the
 * longest list is not read to its end.
 */
export function readAddressList(text: string): AddressList {
	const addresses = new Set<string>();
	const wrong: string[] = [];
	for (const part of text.slice(0, LONGEST_ADDRESS_LIST).split(/[,;\n\r]+/)) {
		for (const word of wordsOf(part.trim())) {
			const parsed = emailAddress.safeParse(word);
			if (parsed.success) addresses.add(parsed.data);
			else wrong.push(word);
		}
	}
	return { addresses: [...addresses], wrong };
}

function wordsOf(part: string): readonly string[] {
	const words = (text: string) => text.split(/\s+/).filter((word) => word !== '');
	const [before = [], ...bracketed] = part.split('<').map((piece) => piece.split('>'));
	const sound =
		before.length === 1 &&
		bracketed.every((piece) => piece.length === 2 && (piece[0] ?? '').includes('@'));
	if (!sound) return words(part);
	const outside = [before[0] ?? '', ...bracketed.map(([, after]) => after ?? '')];
	const last = outside.pop() ?? '';
	// A name is dropped, but an address where a name would stand is one more.
	const named = outside.flatMap((name, i) => [
		...words(name).filter((word) => word.includes('@')),
		(bracketed[i]?.[0] ?? '').trim()
	]);
	return [...named, ...words(last)];
}

const SHOWN_WRONG = 3;
const LONGEST_SHOWN = 60;

/** What is wrong with a list, in a sentence that names it; null when it can be sent to. */
export function addressListProblem({ addresses, wrong }: AddressList): string | null {
	if (wrong.length > 0) {
		const shown = wrong.slice(0, SHOWN_WRONG).map((word) => {
			const cut = word.length > LONGEST_SHOWN ? `${word.slice(0, LONGEST_SHOWN)}…` : word;
			return `“${cut}”`;
		});
		const more = wrong.length > SHOWN_WRONG ? ` and ${wrong.length - SHOWN_WRONG} more` : '';
		const are = wrong.length === 1 ? 'is no e-mail address' : 'are no e-mail addresses';
		return `${shown.join(', ')}${more} ${are}; one looks like name@place.example`;
	}
	if (addresses.length === 0) return 'Give at least one e-mail address';
	if (addresses.length > MOST_ADDRESSES) {
		return `At most ${MOST_ADDRESSES} addresses at once; these are ${addresses.length}`;
	}
	return null;
}
