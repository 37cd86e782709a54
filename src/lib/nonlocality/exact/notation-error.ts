/** Something written that can't be read: where, and what to write instead. */
export class NotationError extends Error {
	constructor(
		message: string,
		/** Zero-based position in the text as it was given, or null where no single place is at fault. */
		readonly position: number | null = null,
		/** What to do about it, as a sentence, or null. */
		readonly suggestion: string | null = null
	) {
		super(message);
		this.name = 'NotationError';
	}
}

/** The error of a part, with the part's place before its message. @throws any other error */
export function errorWithin(place: string, error: unknown): NotationError {
	if (!(error instanceof NotationError)) throw error;
	return new NotationError(`${place}: ${error.message}`, null, error.suggestion);
}

/** Well written, but past a limit that the message names. */
export class NotationLimitError extends NotationError {
	constructor(message: string, position: number | null = null, suggestion: string | null = null) {
		super(message, position, suggestion);
		this.name = 'NotationLimitError';
	}
}
