import { solve, type Problem, type Result } from '../../src/lib/nonlocality';
import { seededRandom } from '../../src/lib/nonlocality/linalg/seeded-random';
import { npaProblem } from '../factories/npa-problem';
import { benchControl } from './contenders';
import { randomTerms, scenario } from './instances';
import { inProcess, measureAll } from './measure';

export interface OtherRow {
	readonly name: string;
	readonly problem: Problem;
	readonly rounds: number;
}

const FIVE = 5;
const SECONDS = 300;

const base = { format: 1, sense: 'max', constraints: [], seconds: SECONDS, seed: 1 } as const;

function random(inputs: number, outcomes: number) {
	const outputs = scenario(inputs, outcomes);
	return { ...base, outputs, terms: randomTerms(outputs, seededRandom(1, inputs)) };
}

function named(name: 'i3322' | 'cglmp', d?: number) {
	const { outputs, terms } = npaProblem({ name, ...(d && { d }) }, 1);
	return { ...base, outputs, terms };
}

const seeSaw = { quantity: 'see-saw', state: 'free' } as const;

/** Quantities that csdp and sdpa have no part in: time only. */
export const OTHER_ROWS: readonly OtherRow[] = [
	{
		name: 'local maximum, random 12x12, 2 outcomes',
		problem: { ...random(12, 2), quantity: 'local' },
		rounds: FIVE
	},
	{
		name: 'no-signalling maximum, random 6x6, 2 outcomes',
		problem: { ...random(6, 2), quantity: 'no-signalling' },
		rounds: FIVE
	},
	{
		name: 'no-signalling maximum, random 3x3, 3 outcomes',
		problem: { ...random(3, 3), quantity: 'no-signalling' },
		rounds: FIVE
	},
	{
		name: 'level 1, random 130x130, 2 outcomes',
		problem: { ...random(130, 2), quantity: 'npa', level: 1, nonNegative: false },
		rounds: FIVE
	},
	{
		name: 'see-saw, CGLMP d=5, local dimension 5',
		problem: { ...named('cglmp', 5), ...seeSaw, dimension: [5, 5], starts: 5 },
		rounds: FIVE
	},
	{
		name: 'see-saw, I3322 grown to local dimension 34',
		problem: { ...named('i3322'), ...seeSaw, dimension: [2, 2], starts: 10, grow: 34 },
		rounds: 1
	}
];

/** Median milliseconds, and what came out. */
export async function measureOther({
	problem,
	rounds
}: OtherRow): Promise<{ milliseconds: number; outcome: string }> {
	let result: Result | null = null;
	const run = inProcess('ours', async () => {
		result = await solve(problem, benchControl);
	});
	const times = await measureAll([run], rounds);
	return { milliseconds: times.get('ours') ?? NaN, outcome: result ? printSides(result) : '' };
}

function printSides(result: Result): string {
	if (result.status !== 'done') return `${result.status}: ${result.reason}`;
	return `${result.lower ?? '?'} to ${result.upper ?? '?'}`;
}
