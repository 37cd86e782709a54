/** What an audit row keeps of before or after: fields by name, or nothing. */
export type Recorded = Readonly<Record<string, unknown>>;

/** Reads a column of JSON, whatever it holds. */
export function asRecorded(json: unknown): Recorded {
	return typeof json === 'object' && json !== null && !Array.isArray(json)
		? Object.fromEntries(Object.entries(json))
		: {};
}

export function valueOf(recorded: Recorded, field: string): unknown {
	return recorded[field] ?? null;
}

/** A field that is text; empty when it is none. */
export function textOf(recorded: Recorded, field: string): string {
	const value = valueOf(recorded, field);
	return typeof value === 'string' ? value : '';
}
