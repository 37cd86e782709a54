const MONTHS = 'Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec'.split(' ');

/** `14 Dec 2026` of `2026-12-14`, of the day alone or of a moment that begins with it. */
export function dayWords(at: string): string {
	return `${Number(at.slice(8, 10))} ${MONTHS[Number(at.slice(5, 7)) - 1] ?? ''} ${at.slice(0, 4)}`;
}
