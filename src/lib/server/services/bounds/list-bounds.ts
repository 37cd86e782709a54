import type { BoundsQuery } from '../../../schemas/bounds-query';
import type { BoundsPage } from '../../../schemas/views';
import type { Context } from '../../context';

export async function listBounds(_ctx: Context, _query: BoundsQuery): Promise<BoundsPage> {
	throw new Error('being written');
}
