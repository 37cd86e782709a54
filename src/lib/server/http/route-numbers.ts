import { error } from '@sveltejs/kit';

/** The claim's number in an address; anything else is an address at which there is nothing. */
export function claimNumber(text: string): number {
	if (!/^[1-9]\d{0,8}$/.test(text)) error(404, 'There is no such claim.');
	return Number(text);
}
