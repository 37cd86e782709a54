import { NotationError, NotationLimitError } from '../nonlocality/notation';

/** A malformed problem: the field at fault, as a path (`terms[3][0]`), and what is wrong with it. */
export class ProblemError extends Error {
	constructor(
		readonly field: string,
		readonly problem: string,
		/** Zero-based position in the field's text, where it is known. */
		readonly position: number | null = null,
		readonly suggestion: string | null = null
	) {
		const place = position === null ? '' : ` (at position ${position})`;
		super(`${field}: ${problem}${place}${suggestion ? `. ${suggestion}` : ''}`);
		this.name = 'ProblemError';
	}
}

/** A well-formed problem past a limit, which the message names. */
export class ProblemLimitError extends Error {
	constructor(
		readonly field: string,
		readonly limit: string
	) {
		super(`${field}: ${limit}`);
		this.name = 'ProblemLimitError';
	}
}

/** A problem of the format that no solver serves yet. */
export class UnsolvedQuantityError extends Error {
	constructor(readonly quantity: string) {
		super(`no solver for this quantity yet: ${quantity}`);
		this.name = 'UnsolvedQuantityError';
	}
}

/** Runs `read`, turning what notations complain about into a problem's error on `field`. */
export function onField<T>(field: string, read: () => T): T {
	try {
		return read();
	} catch (error) {
		if (error instanceof NotationLimitError) throw new ProblemLimitError(field, error.message);
		if (error instanceof NotationError)
			throw new ProblemError(field, error.message, error.position, error.suggestion);
		if (error instanceof RangeError) throw new ProblemError(field, error.message);
		throw error;
	}
}
