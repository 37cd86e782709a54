/**
 * The largest local dimension of each party that a see-saw problem allows: its own, one for all or
 * one per party, or the one that it grows to.
 */
export function largestDimensions(
	{
		dimension,
		grow
	}: { readonly dimension: readonly number[]; readonly grow?: number | undefined },
	parties: number
): readonly number[] {
	return Array.from({ length: parties }, (_, party) => {
		const own = dimension.length === 1 ? dimension[0] : dimension[party];
		return Math.max(own ?? 0, grow ?? 0);
	});
}
