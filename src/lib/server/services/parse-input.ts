import type { z } from 'zod';
import { ServiceError } from '../errors';

/**
 * Parses what a verb was handed.
 * @throws ServiceError invalid, with an issue per field
 */
export function parseInput<T extends z.ZodType>(schema: T, input: unknown): z.output<T> {
	const parsed = schema.safeParse(input);
	if (parsed.success) return parsed.data;
	const issues = parsed.error.issues.map(({ path, message }) => ({
		field: path.map(String).join('.'),
		message
	}));
	throw new ServiceError('invalid', issues[0]?.message ?? 'This input is not usable.', issues);
}
