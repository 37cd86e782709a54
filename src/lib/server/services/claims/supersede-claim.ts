import type { GroupContext } from '../../context';

export async function supersedeClaim(
	_ctx: GroupContext,
	_number: number,
	_byNumber: number
): Promise<void> {
	throw new Error('being written');
}
