/**
 * The SDPA sparse format (.dat-s), which general semidefinite solvers read: minimise c.x subject to
 * sum_k x_k F_k - F_0 >= 0, block-diagonal. As in the SDPA user's manual, Fujisawa, Kojima, Nakata,
 * Yamashita, Tokyo Institute of Technology research report B-308 (1995, revised 2002).
 */
export interface SdpaProgramme {
	/** Lines without their mark, printed before the programme. */
	readonly comments: readonly string[];
	/** Block sizes; negative for a diagonal block. */
	readonly blocks: readonly number[];
	/** c, one entry per F_1, F_2 ... */
	readonly objective: readonly number[];
	readonly entries: readonly SdpaEntry[];
}

/** `value` at (row, column) and (column, row) of a block of F_matrix; all but `matrix` count from 1. */
export interface SdpaEntry {
	readonly matrix: number;
	readonly block: number;
	readonly row: number;
	readonly column: number;
	readonly value: number;
}

export function printSdpa(programme: SdpaProgramme): string {
	const { comments, blocks, objective, entries } = programme;
	return [
		...comments.map((line) => `"${line}`),
		`${objective.length} = number of variables`,
		`${blocks.length} = number of blocks`,
		blocks.join(' '),
		objective.map(String).join(' '),
		...entries.map((e) => `${e.matrix} ${e.block} ${e.row} ${e.column} ${e.value}`),
		''
	].join('\n');
}

/** Text that is not in the SDPA sparse format; the message begins with the line. */
export class SdpaError extends Error {
	constructor(
		readonly line: number,
		message: string
	) {
		super(`line ${line}: ${message}`);
		this.name = 'SdpaError';
	}
}

/** More text than this is not read. */
const MOST_CHARACTERS = 50_000_000;
const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d{1,3})?$/;

interface Line {
	readonly number: number;
	readonly text: string;
}

/** @throws SdpaError naming the line. */
export function parseSdpa(text: string): SdpaProgramme {
	if (text.length > MOST_CHARACTERS)
		throw new SdpaError(1, `the text is longer than ${MOST_CHARACTERS} characters`);
	const all = text.split(/\r?\n/).map((content, i) => ({ number: i + 1, text: content.trim() }));
	const first = all.findIndex((line) => line.text !== '' && !/^["*]/.test(line.text));
	const comments = all
		.slice(0, first < 0 ? all.length : first)
		.filter((line) => line.text !== '')
		.map((line) => line.text.slice(1));
	const lines = first < 0 ? [] : all.slice(first).filter((line) => line.text !== '');
	const lineAt = (place: number, what: string): Line => {
		const line = lines[place];
		if (!line) throw new SdpaError(all.length, `the text ends before ${what}`);
		return line;
	};
	const variables = readCount(lineAt(0, 'the number of variables'), 'the number of variables');
	const blockCount = readCount(lineAt(1, 'the number of blocks'), 'the number of blocks');
	const blocks = readBlocks(lineAt(2, 'the block sizes'), blockCount);
	const objectiveLine = lineAt(3, 'the objective');
	const objective = numbersOf(objectiveLine);
	if (objective.length !== variables)
		throw new SdpaError(
			objectiveLine.number,
			`the objective has ${objective.length} entries, not ${variables}`
		);
	const entries = lines.slice(4).map((line) => readEntry(line, variables, blocks));
	return { comments, blocks, objective, entries };
}

/** The format lets commas, braces and parentheses stand between numbers. */
function wordsOf(line: Line): string[] {
	return line.text.split(/[\s,{}()]+/).filter((word) => word !== '');
}

function numbersOf(line: Line): number[] {
	return wordsOf(line).map((word) => readNumber(line, word));
}

function readNumber(line: Line, word: string): number {
	const value = NUMBER.test(word) ? Number(word) : NaN;
	if (!Number.isFinite(value)) throw new SdpaError(line.number, `"${word}" is not a number`);
	return value;
}

function readCount(line: Line, what: string): number {
	const word = wordsOf(line)[0] ?? '';
	if (!/^\d{1,7}$/.test(word) || Number(word) === 0)
		throw new SdpaError(line.number, `${what} must be a positive whole number, not "${word}"`);
	return Number(word);
}

function readBlocks(line: Line, count: number): number[] {
	const blocks = wordsOf(line)
		.slice(0, count)
		.map((word) => readNumber(line, word));
	if (blocks.length !== count)
		throw new SdpaError(line.number, `${blocks.length} block sizes for ${count} blocks`);
	for (const size of blocks)
		if (!Number.isInteger(size) || size === 0)
			throw new SdpaError(line.number, `${size} is no block size`);
	return blocks;
}

function readEntry(line: Line, variables: number, blocks: readonly number[]): SdpaEntry {
	const [matrix = NaN, block = NaN, row = NaN, column = NaN, value = NaN, extra] = numbersOf(line);
	if (Number.isNaN(value) || extra !== undefined)
		throw new SdpaError(line.number, 'an entry is five numbers: matrix, block, row, column, value');
	const size = blocks[block - 1];
	if (!Number.isInteger(matrix) || matrix < 0 || matrix > variables)
		throw new SdpaError(line.number, `there is no matrix ${matrix}`);
	if (size === undefined) throw new SdpaError(line.number, `there is no block ${block}`);
	for (const place of [row, column])
		if (!Number.isInteger(place) || place < 1 || place > Math.abs(size))
			throw new SdpaError(line.number, `block ${block} has no row or column ${place}`);
	if (size < 0 && row !== column)
		throw new SdpaError(line.number, `block ${block} is diagonal, and ${row} is not ${column}`);
	return { matrix, block, row, column, value };
}
