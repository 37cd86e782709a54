export const ERROR_STATUS = {
	invalid: 400,
	unauthenticated: 401,
	forbidden: 403,
	'not-found': 404,
	conflict: 409,
	'too-large': 413,
	'rate-limited': 429,
	unavailable: 503
} as const;
export type ErrorCode = keyof typeof ERROR_STATUS;

/** One thing wrong with one field of the input. */
export interface FieldIssue {
	/** Name of the form field or JSON path. */
	readonly field: string;
	readonly message: string;
	/** Zero-based position in the field's text, where it is known. */
	readonly position?: number;
}

/** The only error a service throws on purpose; each transport maps it once. */
export class ServiceError extends Error {
	constructor(
		readonly code: ErrorCode,
		message: string,
		readonly issues: readonly FieldIssue[] = [],
		/** For `rate-limited` and `unavailable`: when another try makes sense. */
		readonly retryAfterSeconds: number | null = null
	) {
		super(message);
		this.name = 'ServiceError';
	}

	get status(): number {
		return ERROR_STATUS[this.code];
	}
}
