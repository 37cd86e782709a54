import { describe, expect, it } from 'vitest';
import { verticesOfGroup } from '../certificates/group-vertices';
import { ZERO, printRational, ratio, type Rational } from '../exact/rational';
import { SolverStop } from '../problem';
import { noSignallingRows } from './no-signalling-rows';
import { polytopeVertices } from './polytope-vertices';

/** Every vertex as its table of probabilities other than 0, in one order. */
function tablesOf(outputs: number[][]): string[] {
	const polytope = noSignallingRows({ outputs });
	return polytopeVertices(polytope, () => {}).map((vertex) =>
		textOf(
			polytope.rows.map(({ key, constant, entries }) => [
				key,
				entries.reduce(
					(sum, [column, value]) => sum.add((vertex[column] ?? ZERO).mul(value)),
					ratio(BigInt(constant))
				)
			])
		)
	);
}

function textOf(entries: Iterable<readonly [string, Rational]>): string {
	return [...entries]
		.filter(([, value]) => value.n !== 0n)
		.map(([key, value]) => `${key}=${printRational(value)}`)
		.sort()
		.join(' ');
}

describe('polytopeVertices', () => {
	it('finds 16 deterministic boxes and 8 of Popescu and Rohrlich', () => {
		// Barrett et al., Phys. Rev. A 71, 022101 (2005)
		const tables = tablesOf([
			[2, 2],
			[2, 2]
		]);
		expect(tables.filter((text) => !text.includes('/'))).toHaveLength(16);
		expect(tables.filter((text) => text.includes('=1/2'))).toHaveLength(8);
		expect(tables).toHaveLength(24);
	});

	it('lists the strategies of one party', () => {
		expect(tablesOf([[2, 3, 2]])).toHaveLength(12);
		expect(tablesOf([[2], [3]])).toHaveLength(6);
	});

	it.each([
		[
			[
				[2, 2, 2],
				[2, 2]
			]
		],
		[
			[
				[3, 2],
				[2, 2]
			]
		],
		[
			[
				[3, 3],
				[2, 2]
			]
		],
		[[[2, 2], [2], [2, 2]]]
	])('agrees with the list that the check makes, for %j', (outputs) => {
		const again = verticesOfGroup({ outputs })?.map(textOf) ?? [];
		expect(tablesOf(outputs).sort()).toEqual(again.sort());
	});

	it('refuses to list too many', () => {
		const outputs = [
			[2, 2, 2, 2],
			[2, 2, 2, 2]
		];
		expect(() => polytopeVertices(noSignallingRows({ outputs }), () => {})).toThrow(SolverStop);
	});
});
