import { sdpaQuery, type SdpaQuery } from '../../../schemas/sdpa-query';
import type { Problem } from '../../../nonlocality/problem';
import type { Context } from '../../context';
import { ServiceError } from '../../errors';
import { parseInput } from '../parse-input';
import { readLevel } from '../recomputations/claim-problem';
import { printProgramme } from '../recomputations/sdpa-text';
import { problemBase } from '../recomputations/station-problems';
import { findInequality } from './inequality-rows';
import { mayViewInequality } from './visibility';

/** No time is spent on solving. */
const SECONDS = 1;

/**
 * Any moment-matrix relaxation of an inequality's representative in the SDPA sparse format.
 * @throws ServiceError not-found; invalid for a level that does not fit or is past the limits
 */
export async function inequalitySdpa(
	ctx: Context,
	id: string,
	query: Partial<SdpaQuery>
): Promise<{ readonly name: string; readonly text: string }> {
	const { read } = ctx.db;
	const row = await findInequality(read, id);
	if (!row || !(await mayViewInequality(ctx, row))) {
		throw new ServiceError('not-found', 'There is no such inequality.');
	}
	const asked = parseInput(sdpaQuery, query);
	const level = readLevel(asked.level);
	if ('field' in level) throw new ServiceError('invalid', level.message, [level]);
	if (level.level === '1+AB' && row.parties !== 2) {
		const message = 'Level 1+AB is for two parties; take 1 per party.';
		throw new ServiceError('invalid', message, [{ field: 'level', message }]);
	}
	const nonNegative = asked.nonNegative !== undefined;
	const problem: Problem = {
		...problemBase(row, SECONDS, asked.sense),
		quantity: 'npa',
		level: level.level,
		nonNegative
	};
	const parts = [
		level.label.replace(/[^\w+]+/g, '-'),
		nonNegative && 'P-non-negative',
		asked.sense
	];
	const name = `merestone-${id}-${parts.filter(Boolean).join('-')}.dat-s`;
	return { name, text: await printProgramme(problem) };
}
