/** A form's text fields by name; of several with one name the last. */
export function typedIn(data: FormData): Record<string, string> {
	const typed: Record<string, string> = {};
	for (const [name, value] of data) if (typeof value === 'string') typed[name] = value;
	return typed;
}
