import type { Context } from '../../context';

/** The semidefinite programme in the SDPA sparse format. */
export async function sdpaText(_ctx: Context, _id: string): Promise<string> {
	throw new Error('being written');
}
