import type { Result } from '../../../nonlocality/problem';
import type { Context } from '../../context';

export async function downloadResult(_ctx: Context, _id: string): Promise<Result> {
	throw new Error('being written');
}
