import { NotationError } from '../exact/notation-error';
import { INPUT_LABELS, checkPartyCount, partyOf, readIndices } from './expression-indices';
import { PARTY_LETTERS, type Node, type WrittenInput } from './expression-tree';
import { CLOSING, readSubscript, type TokenReader } from './token-reader';

const EXAMPLE = 'E(0,1)';

/**
 * Whether the letter just taken starts a correlator of all parties: `E(0,1)`, `E[A0 B0]`, `E_{0,1}`,
 * and `E_{01}` where no party is named. A `C` does where it is the only letter of a party.
 * @param bracketed inside < and >, where E_{10} can only be an observable
 */
export function startsCorrelator(reader: TokenReader, letter: string, bracketed: boolean): boolean {
	if (letter !== 'E' && (letter !== 'C' || reader.names('ABDEF'))) return false;
	const { text } = reader.peek();
	if (text === '(' || text === '[') return true;
	if (text !== '_' || bracketed) return false;
	const braced = reader.peek(1).text === '{';
	if (braced && reader.peek(3).text === ',') return true;
	return (
		!reader.names(letter === 'E' ? 'ABCD' : 'ABD') &&
		/^\d{2,}$/.test(reader.peek(braced ? 2 : 1).text)
	);
}

/** What follows the letter E: its inputs, or its observables. */
export function readCorrelator(reader: TokenReader, position: number): Node {
	reader.accept('_');
	const opening = reader.peek().text;
	const closing = CLOSING[opening];
	if (closing !== undefined) reader.take();
	if (closing !== undefined && reader.peek().kind === 'letter' && !isLabel(reader)) {
		const inputs = readObservables(reader, closing);
		return { kind: 'correlator', inputs, everyone: false, position };
	}
	const written = readIndices(
		reader,
		closing === undefined ? [] : [closing],
		position,
		EXAMPLE,
		INPUT_LABELS
	);
	if (closing !== undefined) reader.take();
	const list =
		written.length === 1 && (written[0]?.length ?? 0) > 1 ? [...(written[0] ?? '')] : written;
	const inputs = list.map((digits, party) => ({ party, index: Number(digits), position }));
	checkPartyCount(inputs.length, position);
	return { kind: 'correlator', inputs, everyone: true, position };
}

/** `x=`: the index that follows has a name. */
const isLabel = (reader: TokenReader) => reader.peek(1).text === '=';

/** `A0, B1` or `A0 B1` up to the closing bracket. */
function readObservables(reader: TokenReader, closing: string): WrittenInput[] {
	const inputs: WrittenInput[] = [];
	while (!reader.accept(closing)) {
		const { text, kind, position } = reader.take();
		const party = kind === 'letter' ? partyOf(text) : null;
		const index = party === null ? null : readSubscript(reader, text);
		if (party === null || index === null)
			throw new NotationError(
				kind === 'letter'
					? `${text} does not say which input is meant`
					: 'E takes one product of observables',
				position,
				`Write ${EXAMPLE} or E(A0,B1), each correlator apart.`
			);
		if (inputs.some((input) => input.party === party))
			throw new NotationError(
				`party ${PARTY_LETTERS[party] ?? ''} occurs twice in one product`,
				position
			);
		inputs.push({ party, index, position });
		reader.accept(',');
	}
	return inputs;
}
