import { SolverStop, type Level } from '../problem';
import { makeAlphabet, reducedStrings, type Alphabet, type Word } from './moment-words';
import type { Scenario } from '../scenario/scenario';

/** Words of one party have a fixed number of letters in each block of a level. */
type Shape = readonly number[];

/** A level as a person writes it: `2`, `1+AB`, `2 per party`, `A, B, AB`. */
export function printLevel(level: Level): string {
	if (typeof level === 'number' || typeof level === 'string') return String(level);
	if ('perParty' in level) return `${level.perParty} per party`;
	return level.products.join(', ');
}

/** All ways to give each party a number of letters that `accept` allows. */
function shapes(parties: number, most: number, accept: (shape: Shape) => boolean): Shape[] {
	let found: number[][] = [[]];
	for (let party = 0; party < parties; party++) {
		found = found.flatMap((shape) =>
			Array.from({ length: most + 1 }, (_, length) => [...shape, length])
		);
	}
	return found.filter(accept);
}

const total = (shape: Shape) => shape.reduce((sum, length) => sum + length, 0);

function checkedCount(value: number, what: string): number {
	if (!Number.isInteger(value) || value < 1)
		throw new SolverStop('failed', `level: ${what} must be a whole number of at least 1`);
	return value;
}

function shapeOfProduct(product: string, parties: number): Shape {
	const shape = Array.from({ length: parties }, () => 0);
	for (const letter of product) {
		const party = letter.charCodeAt(0) - 65;
		if (party < 0 || party >= parties)
			throw new SolverStop('failed', `level: "${product}" names a party that the scenario lacks`);
		shape[party] = (shape[party] ?? 0) + 1;
	}
	return shape;
}

function printShape(shape: Shape): string {
	return shape.map((count, party) => String.fromCharCode(65 + party).repeat(count)).join('');
}

function productShapes(products: readonly string[], parties: number): Shape[] {
	const listed = new Map<string, Shape>([['', shapeOfProduct('', parties)]]);
	for (const product of products) {
		const shape = shapeOfProduct(product, parties);
		listed.set(printShape(shape), shape);
	}
	for (const shape of listed.values()) {
		if (total(shape) === 0) continue;
		const shorter = shape
			.map((count, party) => (count > 0 ? printShape(shape.with(party, count - 1)) : null))
			.filter((name) => name !== null);
		if (!shorter.some((name) => listed.has(name)))
			throw new SolverStop(
				'failed',
				`level: ${printShape(shape)} needs one of ${shorter.join(', ')} in the list as well, ` +
					'or the moments have no bound'
			);
	}
	return [...listed.values()];
}

function levelShapes(level: Level, parties: number): Shape[] {
	if (typeof level === 'number') {
		const most = checkedCount(level, 'the length of words');
		return shapes(parties, most, (shape) => total(shape) <= most);
	}
	if (level === '1+AB') {
		if (parties !== 2)
			throw new SolverStop(
				'failed',
				`level 1+AB is for two parties; with ${parties} use 1 per party ({"perParty": 1})`
			);
		return shapes(2, 1, () => true);
	}
	if ('perParty' in level)
		return shapes(parties, checkedCount(level.perParty, 'the letters per party'), () => true);
	return productShapes(level.products, parties);
}

function countStrings(alphabet: Alphabet, party: number, length: number): number {
	const inputs = alphabet.scenario.outputs[party] ?? [];
	let ending = inputs.map((count) => count - 1);
	if (length === 0) return 1;
	for (let step = 1; step < length; step++) {
		const sum = ending.reduce((a, b) => a + b, 0);
		ending = ending.map((mine, x) => (sum - mine) * ((inputs[x] ?? 1) - 1));
	}
	return ending.reduce((a, b) => a + b, 0);
}

/**
 * The monomials of a level, the identity first, shorter words before longer ones.
 * @throws SolverStop `failed` for a level that does not fit the scenario, `limit` when there would
 *   be more than `most` words.
 */
export function levelWords(scenario: Scenario, level: Level, most: number): Word[] {
	const alphabet = makeAlphabet(scenario);
	const blocks = [...levelShapes(level, scenario.outputs.length)].sort(
		(a, b) => total(a) - total(b)
	);
	const size = blocks.reduce(
		(sum, shape) =>
			sum + shape.reduce((product, k, party) => product * countStrings(alphabet, party, k), 1),
		0
	);
	if (size > most)
		throw new SolverStop(
			'limit',
			`level ${printLevel(level)} needs a moment matrix of ${size} rows; the limit is ${most}`
		);
	return blocks.flatMap((shape) => {
		let words: number[][][] = [[]];
		shape.forEach((length, party) => {
			const strings = reducedStrings(alphabet, party, length);
			words = words.flatMap((word) => strings.map((letters) => [...word, letters]));
		});
		return words;
	});
}
