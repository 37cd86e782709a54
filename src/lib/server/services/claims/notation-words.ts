/** How an expression is written, in words: what its reader recognises their paper's notation by. */
export function expressionNotation(source: string): string {
	const latex = /\\[a-zA-Z]|[_^]\{/.test(source);
	const parts = [
		/\\langle|<\s*[A-F]/.test(source) && 'expectation values in brackets',
		/(^|[^a-zA-Z])E\s*(_\{?[^(]{0,20})?\(/.test(source) && 'correlators E',
		/(^|[^a-zA-Z])(P|p|Pr)\s*(_\{?[A-F]{1,6}\}?)?\s*(\\left)?\(/.test(source) && 'probabilities'
	].filter((part) => part !== false);
	const written = parts.length > 0 ? parts.join(' and ') : 'observables';
	return `${latex ? 'Expression pasted as LaTeX' : 'Expression'}, in ${written}`;
}
