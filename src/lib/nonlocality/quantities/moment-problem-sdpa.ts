import type { ProblemOf } from '../problem';
import type { SparseRow } from '../optimization/moment-programme';
import { printSdpa, type SdpaEntry } from '../optimization/sdpa-text';
import { functionalToMaximise } from '../scenario/problem-functional';
import { makeMomentProblem } from './moment-problem';
import { printLevel } from './moment-level';

/**
 * The relaxation as a file in the SDPA sparse format, for any general semidefinite solver. Variable
 * i is moment i; block 1 is the moment matrix, block 2 (diagonal) the rows >= 0, an equality
 * standing there twice, with both signs. The comment says how the optimum is read.
 * @throws SolverStop as npaBound does before it starts.
 */
export function momentProblemSdpa(problem: ProblemOf<'npa'>): string {
	const { matrix, programme } = makeMomentProblem(problem, functionalToMaximise(problem));
	const { size: n, index, objective, unknowns } = programme;
	const entries: SdpaEntry[] = [];
	for (let row = 0; row < n; row++) {
		for (let column = row; column < n; column++) {
			const moment = index[row * n + column] ?? -1;
			if (moment < 0) continue;
			const value = moment === 0 ? -1 : 1; // F_0 is subtracted
			entries.push({ matrix: moment, block: 1, row: row + 1, column: column + 1, value });
		}
	}
	const rows = [
		...programme.rows,
		...programme.equalities.flatMap((row) => [row, { ...row, values: row.values.map((v) => -v) }])
	];
	rows.forEach((row, j) => entries.push(...entriesOfRow(row, j + 1)));
	const constant = objective[0] ?? 0;
	const bound = problem.sense === 'min' ? `x - (${constant})` : `${constant} - x`;
	return printSdpa({
		comments: [
			` Moment-matrix relaxation, NPA level ${printLevel(problem.level)}, ` +
				`outputs ${JSON.stringify(problem.outputs)}`,
			` ${n} monomials, ${unknowns} moments, ${rows.length} linear rows`,
			` With x the optimal value of this file (minimum of c.y), the ${problem.sense}imum of the`,
			` functional over the relaxation is ${bound}.`,
			` Monomials: ${matrix.words.length} words of projectors E(input, output), last outputs left out.`
		],
		blocks: rows.length > 0 ? [n, -rows.length] : [n],
		objective: Array.from({ length: unknowns }, (_, i) => 0 - (objective[i + 1] ?? 0)),
		entries: entries.sort((a, b) => a.matrix - b.matrix || a.block - b.block)
	});
}

function entriesOfRow(row: SparseRow, place: number): SdpaEntry[] {
	return row.columns.flatMap((moment, at) => {
		const value = (row.values[at] ?? 0) * (moment === 0 ? -1 : 1);
		return value === 0 ? [] : [{ matrix: moment, block: 2, row: place, column: place, value }];
	});
}
