import type { ReferencePage } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function showReference(_ctx: GroupContext, _id: string): Promise<ReferencePage> {
	throw new Error('being written');
}
