/**
 * Our moment-matrix bounds against two general-purpose semidefinite solvers, `csdp` and `sdpa`,
 * through the SDPA text: each must lie between our two sides up to its own tolerance. On published
 * inequalities with every kind of level, and on random functionals over ten scenarios.
 */
import { describe, expect, test } from 'vitest';
import type { Level, ProblemOf } from '../../src/lib/nonlocality/problem';
import { momentProblemSdpa } from '../../src/lib/nonlocality/quantities/moment-problem-sdpa';
import { makeMomentProblem } from '../../src/lib/nonlocality/quantities/moment-problem';
import { npaBound } from '../../src/lib/nonlocality/quantities/npa-bound';
import { functionalToMaximise } from '../../src/lib/nonlocality/scenario/problem-functional';
import { PATIENT, npaProblem } from '../factories/npa-problem';
import { randomFunctional } from '../factories/random-functional';
import { lehmer } from '../factories/solver-problem';
import {
	GENERAL_SOLVERS,
	RELATIVE_TOLERANCE,
	isInstalled,
	solveGenerally
} from '../support/general-solvers';

const installed = GENERAL_SOLVERS.filter(isInstalled);
for (const solver of GENERAL_SOLVERS)
	if (!installed.includes(solver))
		console.warn(`${solver} is not installed (Debian's packages): its comparison is skipped`);

/** Our two sides, and what each solver finds for the same programme. */
function expectAgreement(problem: ProblemOf<'npa'>): void {
	const g = functionalToMaximise(problem);
	const constant = makeMomentProblem(problem, g).programme.objective[0] ?? 0;
	const text = momentProblemSdpa(problem);
	const { lower, upper, optimum } = npaBound(problem, g, PATIENT);
	for (const solver of installed) {
		const theirs = constant - solveGenerally(solver, text);
		const tolerance = RELATIVE_TOLERANCE[solver] * (1 + Math.abs(theirs));
		expect(theirs, solver).toBeLessThan((upper ?? NaN) + tolerance);
		expect(theirs, solver).toBeGreaterThan((lower ?? NaN) - tolerance);
		expect(Math.abs(theirs - (optimum ?? NaN)), solver).toBeLessThan(tolerance);
	}
}

describe.skipIf(installed.length === 0)('general solvers agree', () => {
	const cases: [string, ReturnType<typeof npaProblem>][] = [
		...([1, '1+AB', 2] as Level[]).map((level): [string, ReturnType<typeof npaProblem>] => [
			`I3322 level ${String(level)}`,
			npaProblem({ name: 'i3322' }, level)
		]),
		['I3322 level 1, P >= 0', npaProblem({ name: 'i3322' }, 1, { nonNegative: true })],
		['I3322 level 1, minimum', npaProblem({ name: 'i3322' }, 1, { sense: 'min' })],
		['CHSH level 1', npaProblem({ name: 'chsh' }, 1)],
		['tilted CHSH level 2', npaProblem({ name: 'tilted-chsh', alpha: 1 }, 2)],
		['CGLMP d=3 level 1', npaProblem({ name: 'cglmp', d: 3 }, 1)],
		['CGLMP d=3 level 1, P >= 0', npaProblem({ name: 'cglmp', d: 3 }, 1, { nonNegative: true })],
		['CGLMP d=3 level 1+AB', npaProblem({ name: 'cglmp', d: 3 }, '1+AB')],
		['CGLMP d=4 level 1+AB', npaProblem({ name: 'cglmp', d: 4 }, '1+AB')],
		['Svetlichny n=3, one per party', npaProblem({ name: 'svetlichny', n: 3 }, { perParty: 1 })],
		['Mermin n=3 level 2, P >= 0', npaProblem({ name: 'mermin', n: 3 }, 2, { nonNegative: true })],
		[
			'CHSH level 1+AB with a constraint',
			npaProblem({ name: 'chsh' }, '1+AB', {
				constraints: [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1/4' }]
			})
		]
	];
	test.each(cases)('%s', (_, problem) => expectAgreement(problem));
});

/** Scenario, level and whether P >= 0 is imposed; sizes at which all three take milliseconds. */
const SCENARIOS: readonly (readonly [outputs: number[][], level: Level, nonNegative: boolean])[] = [
	[
		[
			[2, 2],
			[2, 2]
		],
		2,
		false
	],
	[
		[
			[2, 2, 2],
			[2, 2, 2]
		],
		'1+AB',
		false
	],
	[
		[
			[2, 2, 2, 2],
			[2, 2, 2]
		],
		'1+AB',
		false
	],
	[
		[
			[3, 3],
			[3, 3]
		],
		1,
		true
	],
	[
		[
			[3, 3],
			[3, 3]
		],
		'1+AB',
		false
	],
	[
		[
			[2, 3, 4],
			[3, 2]
		],
		'1+AB',
		false
	],
	[
		[
			[4, 4],
			[2, 2, 2]
		],
		{ products: ['A', 'B', 'AB', 'BB'] },
		false
	],
	[
		[
			[2, 2],
			[2, 2],
			[2, 2]
		],
		{ perParty: 1 },
		false
	],
	[
		[
			[2, 3],
			[2, 2],
			[2, 2]
		],
		2,
		true
	],
	[
		[
			[2, 2],
			[2, 2],
			[2, 2],
			[2, 2]
		],
		2,
		false
	]
];
const DRAWS = 4;

describe.skipIf(installed.length === 0)('general solvers agree on random functionals', () => {
	const cases = SCENARIOS.flatMap(([outputs, level, nonNegative], place) =>
		Array.from({ length: DRAWS }, (_, draw) => {
			const seed = 100 * place + draw;
			const f = randomFunctional(outputs, 5, lehmer(seed));
			const sense = draw % 2 === 0 ? 'max' : 'min';
			const title = `${JSON.stringify(outputs)}, ${JSON.stringify(level)}, ${sense}, seed ${seed}`;
			return [title, npaProblem(f, level, { nonNegative, sense })] as const;
		})
	);
	test.each(cases)('%s', (_, problem) => expectAgreement(problem));
});
