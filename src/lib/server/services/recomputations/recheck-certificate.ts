import type { CheckOutcome } from '../../../nonlocality/certificates/types';
import type { Context } from '../../context';
import { runShortTask } from '../../jobs/current-pool';
import { downloadResult } from './download-result';

/** Runs the independent check on the stored result again, in a thread. Changes nothing. */
export async function recheckCertificate(ctx: Context, id: string): Promise<CheckOutcome> {
	const result = await downloadResult(ctx, id);
	return runShortTask((pool) => pool.verify(result));
}
