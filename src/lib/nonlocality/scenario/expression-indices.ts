import { NotationError, NotationLimitError } from '../exact/notation-error';
import { EXPRESSION_LIMITS } from './expression-tokens';
import { PARTY_LETTERS } from './expression-tree';
import type { TokenReader } from './token-reader';

/** Names of inputs as papers give them, in the order of the parties. */
export const INPUT_LABELS = 'xyz';

export function partyOf(letter: string): number | null {
	const party = letter === '' ? -1 : PARTY_LETTERS.indexOf(letter);
	return party < 0 ? null : party;
}

export function checkPartyCount(count: number, position: number): void {
	if (count > EXPRESSION_LIMITS.parties)
		throw new NotationLimitError(
			`an expression has at most ${EXPRESSION_LIMITS.parties} parties`,
			position
		);
}

/**
 * Numbers with or without commas between them, up to (not including) one of `closing`; `labels`
 * (x=, y=, z=) may stand before them, in this order.
 */
export function readIndices(
	reader: TokenReader,
	closing: readonly string[],
	position: number,
	example: string,
	labels = ''
): string[] {
	const found: string[] = [];
	for (;;) {
		const label = reader.peek();
		if (found.length > 0 && closing.includes(label.text)) return found;
		if (label.text === labels[found.length] && reader.peek(1).text === '=') {
			reader.take();
			reader.take();
		}
		const token = reader.peek();
		if (token.kind === 'end')
			throw new NotationError('this is never closed', position, `Write ${example}.`);
		if (closing.includes('|') && ')]'.includes(token.text))
			throw new NotationError(
				'a probability needs outputs, a bar and inputs',
				token.position,
				`Write ${example}.`
			);
		if (token.kind !== 'number' || !/^\d+$/.test(token.text))
			throw new NotationError(
				'the indices here have to be numbers',
				token.position,
				token.text === '+' || token.text === '-'
					? 'Outputs are counted from 0: write 0 for +, 1 for -.'
					: `Write them as in ${example}.`
			);
		found.push(token.text);
		reader.take();
		if (closing.length === 0) return found;
		reader.accept(',');
	}
}
