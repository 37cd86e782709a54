import type { ReferenceRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function listReferences(_ctx: GroupContext): Promise<readonly ReferenceRow[]> {
	throw new Error('being written');
}
