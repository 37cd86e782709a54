import { SolverStop } from '../problem';

/** Entries of the state: 64 x 64, some 50 MB of work space. */
export const STATE_LIMIT = 4096;

/** One dimension for all parties, or one per party. @throws SolverStop `failed` */
export function partyDimensions(given: readonly number[], parties: number): number[] {
	const list =
		given.length === 1 ? Array.from({ length: parties }, () => given[0] ?? 1) : [...given];
	if (list.length !== parties)
		throw new SolverStop(
			'failed',
			`dimension: ${given.length} numbers for ${parties} parties; give one, or one per party`
		);
	const wrong = list.find((d) => !Number.isInteger(d) || d < 1);
	if (wrong !== undefined)
		throw new SolverStop('failed', `dimension: ${wrong} is no whole number of at least 1`);
	return list;
}

/** @param field of the problem, for the message. @throws SolverStop `limit` */
export function checkStateSize(dimensions: readonly number[], field: string): void {
	const total = dimensions.reduce((product, d) => product * d, 1);
	if (total > STATE_LIMIT)
		throw new SolverStop(
			'limit',
			`${field}: a state in dimensions ${dimensions.join(' x ')} has ${total} entries; the limit is ${STATE_LIMIT}`
		);
}

export function printDimensions(dimensions: readonly number[]): string {
	const [first] = dimensions;
	return dimensions.every((d) => d === first) ? String(first) : dimensions.join(' x ');
}
