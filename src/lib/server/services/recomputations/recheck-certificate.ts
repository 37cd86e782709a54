import type { CheckOutcome } from '../../../nonlocality/certificates/types';
import type { Context } from '../../context';

/** Runs the independent check again, in a thread. */
export async function recheckCertificate(_ctx: Context, _id: string): Promise<CheckOutcome> {
	throw new Error('being written');
}
