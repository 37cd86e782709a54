/** An error as forms hand it over: a sentence, a list of them, or nothing. */
export type FieldError = string | readonly string[] | null | undefined;

/** One sentence per line of a field's errors; empty when there is none. */
export function errorLines(error: FieldError): readonly string[] {
	if (!error) return [];
	return typeof error === 'string' ? [error] : error;
}

/** The `aria-describedby` of a control with a hint and an error below it. */
export function describedBy(id: string, hint: boolean, error: FieldError): string | undefined {
	const ids = [
		...(hint ? [`${id}-hint`] : []),
		...(errorLines(error).length > 0 ? [`${id}-error`] : [])
	];
	return ids.length > 0 ? ids.join(' ') : undefined;
}
