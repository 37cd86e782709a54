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
