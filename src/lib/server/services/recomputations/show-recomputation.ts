import type { RecomputationView } from '../../../schemas/views';
import type { Context } from '../../context';

/** Visible to whom a claim or public inequality that uses it is visible; others get not-found. */
export async function showRecomputation(_ctx: Context, _id: string): Promise<RecomputationView> {
	throw new Error('being written');
}
