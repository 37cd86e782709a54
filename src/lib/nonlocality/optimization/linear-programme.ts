/** Linear programmes by HiGHS (npm `highs`, WebAssembly): what it returns is only a proposal. */
import type { Highs } from 'highs';
import { SolverStop, type Control } from '../problem';

/** Maximise costs . y over free y with, for every row, sum of its entries * y >= lower bound. */
export interface LinearProgramme {
	readonly costs: Float64Array;
	/** Compressed sparse rows. */
	readonly starts: Int32Array;
	readonly indices: Int32Array;
	readonly values: Float64Array;
	readonly lowerBounds: Float64Array;
}

export interface LinearProgrammeSolution {
	readonly status: 'optimal' | 'infeasible' | 'unbounded';
	readonly primal: Float64Array;
	/** Multiplier of each row, >= 0 up to tolerance: costs + sum of multiplier * row = 0. */
	readonly multipliers: Float64Array;
	/** Rows and columns that are not in the basis; as many as there are columns. */
	readonly activeRows: readonly number[];
	readonly fixedColumns: readonly number[];
	readonly iterations: number;
}

/** Vertices and multipliers as close as doubles allow; the exact check follows anyway. */
const FEASIBILITY_TOLERANCE = 1e-9;

let runtime: Promise<Highs> | null = null;

/** The WebAssembly module is loaded at the first use and kept. */
async function loadRuntime(): Promise<Highs> {
	runtime ??= import('highs')
		.then((module) => module.default())
		.catch((error: unknown) => {
			runtime = null; // a later call tries again
			throw error;
		});
	return runtime;
}

/**
 * Runs the simplex method within `seconds`.
 * @throws SolverStop `cancelled` when told to stop, `limit` when the time is over, `failed` when
 *   HiGHS ends without an answer.
 */
export async function solveLinearProgramme(
	programme: LinearProgramme,
	seconds: number,
	control: Control
): Promise<LinearProgrammeSolution> {
	const highs = await loadRuntime();
	const { costs, starts, indices, values, lowerBounds } = programme;
	const numCols = costs.length;
	const numRows = lowerBounds.length;
	const { modelStatus, callbackType, basisStatus } = highs.constants;
	return highs.withModel(
		{
			numCols,
			numRows,
			colCost: costs.map((c) => 0 - c), // minimised, so that multipliers come out >= 0
			colLower: new Float64Array(numCols).fill(-highs.infinity),
			colUpper: new Float64Array(numCols).fill(highs.infinity),
			rowLower: lowerBounds,
			rowUpper: new Float64Array(numRows).fill(highs.infinity),
			matrix: { format: 'csr', numRows, numCols, starts, indices, values }
		},
		(model) => {
			model.options.set({
				output_flag: false,
				solver: 'simplex',
				time_limit: seconds,
				primal_feasibility_tolerance: FEASIBILITY_TOLERANCE,
				dual_feasibility_tolerance: FEASIBILITY_TOLERANCE
			});
			model.run({
				[callbackType.simplexInterrupt]: (event) => {
					if (control.shouldStop()) event.interrupt();
				}
			});
			const status = model.getModelStatus();
			if (control.shouldStop()) throw new SolverStop('cancelled', 'stopped on request');
			if (status === modelStatus.timeLimit)
				throw new SolverStop('limit', 'the linear programme did not end within its budget of time');
			const solution = model.getSolution();
			const basis = model.getBasis();
			const nonbasic = (list: Int32Array) =>
				[...list.keys()].filter((i) => list[i] !== basisStatus.basic);
			return {
				status: readStatus(status, modelStatus),
				primal: solution.colValue,
				multipliers: solution.rowDual,
				activeRows: nonbasic(basis.rowStatus),
				fixedColumns: nonbasic(basis.colStatus),
				iterations: Number(model.info.get('simplex_iteration_count'))
			};
		}
	);
}

function readStatus(
	status: number,
	codes: Highs['constants']['modelStatus']
): LinearProgrammeSolution['status'] {
	if (status === codes.optimal) return 'optimal';
	if (status === codes.infeasible) return 'infeasible';
	if (status === codes.unbounded || status === codes.unboundedOrInfeasible) return 'unbounded';
	throw new SolverStop('failed', `the linear programme ended without an answer (status ${status})`);
}
