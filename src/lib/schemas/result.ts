import type { z } from 'zod';
import type { DoneResult } from '../nonlocality/problem';
import { parseProblem } from './problem';
import { ProblemError, ProblemLimitError } from './problem-error';
import { resultShape } from './result-shape';

/**
 * Reads a finished result as the command line's `bound` prints it, to be checked: its shape only,
 * and its problem as any other. Whether it proves anything is for the check.
 * @throws ProblemError naming the field, ProblemLimitError, UnsolvedQuantityError
 */
export function parseResult(json: unknown): DoneResult {
	if (typeof json !== 'object' || json === null || Array.isArray(json)) {
		throw new ProblemError('result', 'must be an object, as the command line prints it');
	}
	if (!('problem' in json)) {
		const hint = 'quantity' in json ? 'Run it first: npm run --silent bound -- FILE.json.' : null;
		const what = hint ? 'is missing: this is a problem, not yet its result' : 'is missing';
		throw new ProblemError('problem', what, null, hint);
	}
	const read = resultShape.safeParse(json);
	if (!read.success) throw errorOfIssue(read.error.issues[0]);
	const problem = within('problem', () => parseProblem(json.problem));
	const { quantity, certificate, ...rest } = read.data;
	if (quantity !== problem.quantity) {
		throw new ProblemError('quantity', `is not that of the problem, ${problem.quantity}`);
	}
	return { ...rest, quantity: problem.quantity, problem, certificate: withoutGaps(certificate) };
}

/** Fields that may be left out are left out, not undefined. */
function withoutGaps(
	certificate: z.infer<typeof resultShape>['certificate']
): DoneResult['certificate'] {
	switch (certificate?.kind) {
		case 'npa-dual':
			return moments(certificate);
		case 'deterministic-strategy':
			return deterministic(certificate);
		case 'enclosure': {
			const { lower, upper } = certificate;
			return {
				...certificate,
				lower: lower?.kind === 'deterministic-strategy' ? deterministic(lower) : lower,
				upper: upper?.kind === 'npa-dual' ? moments(upper) : upper
			};
		}
		default:
			return certificate ?? null;
	}
}

type Read = NonNullable<z.infer<typeof resultShape>['certificate']>;

function deterministic({ complete, ...rest }: Extract<Read, { kind: 'deterministic-strategy' }>) {
	return { ...rest, ...(complete === false && { complete }) };
}

function moments({ constraintMultipliers, shift, ...rest }: Extract<Read, { kind: 'npa-dual' }>) {
	return {
		...rest,
		...(constraintMultipliers && { constraintMultipliers }),
		...(shift !== undefined && { shift })
	};
}

function within<T>(field: string, read: () => T): T {
	try {
		return read();
	} catch (error) {
		if (error instanceof ProblemLimitError) {
			throw new ProblemLimitError(`${field}.${error.field}`, error.limit);
		}
		if (!(error instanceof ProblemError)) throw error;
		const path = error.field === field ? field : `${field}.${error.field}`;
		throw new ProblemError(path, error.problem, error.position, error.suggestion);
	}
}

function errorOfIssue(issue: z.core.$ZodIssue | undefined): ProblemError {
	if (!issue) return new ProblemError('result', 'is malformed');
	const keys = issue.code === 'unrecognized_keys' ? issue.keys.slice(0, 1) : [];
	const path = [...issue.path, ...keys]
		.map((key) => (typeof key === 'number' ? `[${key}]` : `.${String(key).slice(0, 40)}`))
		.join('')
		.replace(/^\./, '');
	return new ProblemError(path || 'result', keys.length > 0 ? 'is not known here' : issue.message);
}
