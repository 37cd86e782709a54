/** What proves a side, in the few words that fit under a figure; the claim's page says it whole. */
const SHORT: readonly (readonly [RegExp, string])[] = [
	[/^an explicit quantum strategy in dimension (\d+(?: x \d+)*)$/, 'see-saw d=$1'],
	[/^an explicit quantum strategy$/, 'see-saw'],
	[/^a feasible moment matrix of (?:the )?(NPA level .+)$/, '$1'],
	[/^the (NPA level .+)$/, '$1'],
	[/^(NPA level \S+) with non-negative probabilities$/, '$1, P ≥ 0'],
	[/^(the enumeration of all|a) deterministic strateg(ies|y)$/, 'deterministic strategies'],
	[/^(the no-signalling linear programme|a no-signalling box)$/, 'linear programme'],
	[/^the moment-matrix relaxation$/, 'moment matrices'],
	[/^a reproduction by (.+?)(?: \(.*\))?$/, 'reproduction by $1']
];

/** `see-saw d=2` for `an explicit quantum strategy in dimension 2`; other labels as they are. */
export function shortMethod(label: string): string {
	return SHORT.reduce((text, [pattern, short]) => text.replace(pattern, short), label);
}
