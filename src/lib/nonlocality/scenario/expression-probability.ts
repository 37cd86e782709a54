import { NotationError } from '../exact/notation-error';
import { INPUT_LABELS, checkPartyCount, partyOf, readIndices } from './expression-indices';
import type { Node, WrittenEvent } from './expression-tree';
import { readSubscript, type TokenReader } from './token-reader';

const EXAMPLE = 'P(0,1|1,0) or P_A(0|1)';
/** Names of outputs as papers give them, in the order of the parties. */
const OUTPUT_LABELS = 'abcdef';

/** What follows the letter P. `unknown` makes the error for a letter that is no party. */
export function readProbability(
	reader: TokenReader,
	position: number,
	unknown: (letter: string, position: number) => NotationError
): Node {
	const named = reader.accept('_') ? readParties(reader, position, unknown) : null;
	const closing = reader.peek().text === '[' ? ']' : ')';
	if (!reader.accept('(') && !reader.accept('['))
		throw new NotationError('P needs outputs and inputs', position, `Write ${EXAMPLE}.`);
	if (reader.peek().kind === 'letter' && partyOf(reader.peek().text) === null)
		return readLabelled(reader, closing, named, position);
	if (named === null && reader.peek().kind === 'letter')
		return readEvents(reader, closing, position);
	const outputs = readIndices(reader, ['|'], position, EXAMPLE);
	reader.take();
	const inputs = readIndices(reader, [closing], position, EXAMPLE, INPUT_LABELS);
	reader.take();
	const [a, x] = alignIndices(outputs, inputs, named?.length ?? null, position);
	const parties = named ?? a.map((_, party) => party);
	const events = parties.map((party, i): WrittenEvent => ({
		party,
		index: Number(x[i]),
		output: Number(a[i]),
		position
	}));
	return probability(events, named === null, position);
}

function probability(events: readonly WrittenEvent[], everyone: boolean, position: number): Node {
	checkPartyCount(events.length, position);
	if (new Set(events.map((event) => event.party)).size < events.length)
		throw new NotationError('a party occurs twice in this probability', position);
	return { kind: 'probability', events, everyone, position };
}

/** The parties of P_A, P_AB, P_{AB} or P_{A,B}. */
function readParties(
	reader: TokenReader,
	position: number,
	unknown: (letter: string, position: number) => NotationError
): number[] {
	const braced = reader.accept('{');
	const parties: number[] = [];
	while (reader.peek().kind === 'letter') {
		const token = reader.take();
		const party = partyOf(token.text);
		if (party === null) throw unknown(token.text, token.position);
		parties.push(party);
		if (braced) reader.accept(',');
	}
	if (parties.length === 0 || (braced && !reader.accept('}')))
		throw new NotationError('P_ needs the letters of its parties', position, `Write ${EXAMPLE}.`);
	return parties;
}

/** P(01|10) is P(0,1|1,0): runs of single digits are split where that is the only reading. */
function alignIndices(
	outputs: string[],
	inputs: string[],
	parties: number | null,
	position: number
): [string[], string[]] {
	const spread = (list: string[]) => {
		const [run] = list;
		const wanted = parties ?? run?.length;
		return list.length === 1 && run && run.length === wanted ? [...run] : list;
	};
	const [a, x] = [spread(outputs), spread(inputs)];
	const count = parties ?? a.length;
	if (a.length === count && x.length === count) return [a, x];
	throw new NotationError(
		parties === null
			? `${a.length} outputs for ${x.length} inputs`
			: `${parties} parties are named, with ${a.length} outputs and ${x.length} inputs`,
		position,
		'Write one output and one input per party, with commas between: P(0,1|1,0).'
	);
}

/** P(a=0,b=1|x=0,y=1), P(ab=01|xy=01): the names say whose they are. */
function readLabelled(
	reader: TokenReader,
	closing: string,
	named: readonly number[] | null,
	position: number
): Node {
	const outputs = readLabels(reader, OUTPUT_LABELS, '|');
	const inputs = readLabels(reader, INPUT_LABELS, closing);
	const events = [...outputs].map(([party, output]): WrittenEvent => {
		const index = inputs.get(party);
		if (index === undefined)
			throw new NotationError(
				`the input beside ${OUTPUT_LABELS[party] ?? ''} is missing`,
				position,
				'Write P(a=0,b=1|x=0,y=1).'
			);
		return { party, index, output, position };
	});
	if (named && (named.length !== outputs.size || !named.every((party) => outputs.has(party))))
		throw new NotationError(
			'the names in this probability are not those of its parties',
			position,
			'Write P_A(a=0|x=1), or P(a=0|x=1).'
		);
	if (inputs.size > outputs.size)
		throw new NotationError(
			`${outputs.size} outputs for ${inputs.size} inputs`,
			position,
			'Write P(a=0,b=1|x=0,y=1).'
		);
	return probability(events, false, position);
}

/** `a=0, b=1` or `ab=01`, up to and with `closing`: the number of each party. */
function readLabels(reader: TokenReader, labels: string, closing: string): Map<number, number> {
	const found = new Map<number, number>();
	while (!reader.accept(closing)) {
		const parties: number[] = [];
		const start = reader.peek();
		for (; reader.peek().kind === 'letter'; reader.take())
			parties.push(labels.indexOf(reader.peek().text));
		const equals = reader.accept('=');
		const { text, kind } = reader.peek();
		const digits = parties.length === 1 ? [text] : [...text];
		if (!equals || kind !== 'number' || !/^\d+$/.test(text) || digits.length !== parties.length)
			throw new NotationError(
				kind === 'letter' && equals
					? 'a probability that two outputs are equal is a sum'
					: 'the outputs and inputs here have to be numbers',
				start.position,
				kind === 'letter' && equals
					? 'Write it out: P(0,0|0,0) + P(1,1|0,0).'
					: `Write them as in P(0,1|1,0) or P(a=0,b=1|x=1,y=0).`
			);
		reader.take();
		parties.forEach((party, i) => {
			if (party < 0 || found.has(party))
				throw new NotationError(
					party < 0 ? 'this name says of no party whose it is' : 'a name occurs twice',
					start.position,
					`Names are ${[...labels].join(', ')}, in the order of the parties.`
				);
			found.set(party, Number(digits[i]));
		});
		reader.accept(',');
	}
	return found;
}

/** P(A_1=0,B_2=1): the output of each observable. */
function readEvents(reader: TokenReader, closing: string, position: number): Node {
	const events: WrittenEvent[] = [];
	while (!reader.accept(closing)) {
		const { text: letter, position: at } = reader.take();
		const party = partyOf(letter);
		const index = party === null ? null : readSubscript(reader, letter);
		const equals = index !== null && reader.accept('=');
		const { kind, text } = reader.peek();
		if (party === null || index === null || !equals || kind !== 'number' || !/^\d+$/.test(text))
			throw new NotationError(
				equals && kind === 'letter'
					? 'a probability that two outputs are equal is a sum'
					: 'this probability is not understood',
				at,
				'Write it out with numbers, as P(0,0|1,1) + P(1,1|1,1).'
			);
		reader.take();
		events.push({ party, index, output: Number(text), position });
		reader.accept(',');
	}
	return probability(events, false, position);
}
