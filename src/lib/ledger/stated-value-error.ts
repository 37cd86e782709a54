/** A value that can't be read: where, and what to do. */
export class StatedValueError extends Error {
	constructor(
		message: string,
		/** Zero-based position in what was typed. */
		readonly position: number
	) {
		super(message);
		this.name = 'StatedValueError';
	}
}
