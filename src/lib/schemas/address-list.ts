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
 * as mail programmes copy it counts as the address in the brackets.
 */
export function readAddressList(text: string): AddressList {
	const addresses = new Set<string>();
	const wrong: string[] = [];
	for (const part of text.split(/[,;\n\r]+/)) {
		for (const word of wordsOf(part.trim())) {
			const parsed = emailAddress.safeParse(word);
			if (parsed.success) addresses.add(parsed.data);
			else wrong.push(word);
		}
	}
	return { addresses: [...addresses], wrong };
}

function wordsOf(part: string): readonly string[] {
	const bracketed = part.match(/<[^<>]*>/g);
	if (bracketed) return bracketed.map((word) => word.slice(1, -1).trim() || word);
	return part.split(/\s+/).filter((word) => word !== '');
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
