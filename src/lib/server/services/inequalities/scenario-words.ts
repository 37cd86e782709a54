const joined = (counts: readonly number[], word: string) =>
	counts.length === 1
		? String(counts[0])
		: `${counts.slice(0, -1).join(', ')} ${word} ${counts.at(-1)}`;

const distinct = (counts: readonly number[]) => [...new Set(counts)].sort((a, b) => a - b);

/** `2 in, 2 out`, `3 and 4 in, 2 out`, `3 parties, 2 in, 2 out`: for tables and the filter. */
export function scenarioLabel(outputs: readonly (readonly number[])[]): string {
	const inputs = distinct(outputs.map((party) => party.length));
	const counts = distinct(outputs.flat());
	const parts = [`${joined(inputs, 'and')} in`, `${joined(counts, 'or')} out`];
	if (outputs.length !== 2) {
		parts.unshift(outputs.length === 1 ? '1 party' : `${outputs.length} parties`);
	}
	return parts.join(', ');
}

/** `2 parties, 2 inputs each, 2 outputs`: for the panel beside the form. */
export function scenarioSentence(outputs: readonly (readonly number[])[]): string {
	const parties = outputs.length === 1 ? '1 party' : `${outputs.length} parties`;
	const inputs = outputs.map((party) => party.length);
	const [first, ...others] = distinct(inputs);
	const each =
		others.length === 0
			? `${first} ${first === 1 ? 'input' : 'inputs'} each`
			: `${joined(inputs, 'and')} inputs`;
	return `${parties}, ${each}, ${joined(distinct(outputs.flat()), 'or')} outputs`;
}
