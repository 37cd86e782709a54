import type { Problem, Result } from '../lib/nonlocality';
import {
	ProblemError,
	ProblemLimitError,
	UnsolvedQuantityError,
	parseProblem
} from '../lib/schemas/problem';
import { CommandError, EXIT } from './read-input';

/** parseProblem with the exit code each of its complaints has. @throws CommandError */
export function readProblem(json: unknown): Problem {
	try {
		return parseProblem(json);
	} catch (error) {
		if (error instanceof ProblemError) throw new CommandError(EXIT.malformed, error.message);
		if (error instanceof ProblemLimitError) throw new CommandError(EXIT.limit, error.message);
		if (error instanceof UnsolvedQuantityError)
			throw new CommandError(EXIT.unfinished, error.message);
		throw error;
	}
}

export function exitCodeOf(result: Result): number {
	if (result.status === 'done') return EXIT.done;
	return result.status === 'limit' ? EXIT.limit : EXIT.unfinished;
}
