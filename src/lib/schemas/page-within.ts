/** The page asked for; the first when that is no page, the last when there are fewer. */
export function pageWithin(asked: number, total: number, pageSize: number): number {
	if (!Number.isSafeInteger(asked) || asked < 1) return 1;
	return Math.min(asked, Math.max(1, Math.ceil(total / pageSize)));
}
