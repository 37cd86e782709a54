/** `value`, `value and locator`, `value, locator and inequality`; empty of nothing. */
export function listed(words: readonly string[]): string {
	const last = words.at(-1) ?? '';
	return words.length < 2 ? last : `${words.slice(0, -1).join(', ')} and ${last}`;
}
