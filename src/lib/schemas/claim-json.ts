import { z } from 'zod';
import { READINGS, RELATIONS, type ReadingChoice, type Relation } from '../ledger/claim';
import { LONGEST_PRINTED } from '../ledger/stated-value';
import { ProblemError } from './problem-error';

/** One claim as the command line reads it; the problem is still as it was written. */
export interface ClaimJson {
	readonly problem: object;
	readonly relation: Relation;
	readonly printed: string;
	readonly reading: ReadingChoice;
	readonly method: string;
}

const kind = (what: string) => ({ error: `must be ${what}` });
const LONGEST_METHOD = 300;

const claimShape = z.strictObject({
	problem: z.looseObject({}, kind('an object')),
	relation: z.enum(RELATIONS, kind('=, <= or >=')).default('='),
	/** A JSON number is the decimal of its shortest form; a text keeps trailing zeros. */
	value: z.union(
		[
			z.number().transform(String),
			z.string().max(LONGEST_PRINTED, `has at most ${LONGEST_PRINTED} characters`)
		],
		kind('a text such as "2.8284" or "2*sqrt(2)", or a number')
	),
	reading: z.enum(READINGS, kind('rounded, truncated or exact')).default('as-printed'),
	/** The method the paper says it used; orders the explanations. */
	method: z
		.string(kind('a text'))
		.max(LONGEST_METHOD, `has at most ${LONGEST_METHOD} characters`)
		.default('')
});

/** @throws ProblemError naming the field. */
export function parseClaimJson(json: unknown): ClaimJson {
	const read = claimShape.safeParse(json);
	if (read.success) {
		const { problem, relation, value, reading, method } = read.data;
		return { problem, relation, printed: value, reading, method };
	}
	const [issue] = read.error.issues;
	if (issue?.code === 'unrecognized_keys')
		throw new ProblemError(
			(issue.keys[0] ?? '').slice(0, 40),
			'is not known here; a claim has problem, relation, value, reading, method'
		);
	const field = issue?.path.map((key) => String(key).slice(0, 40)).join('.') ?? '';
	const missing = field !== '' && (typeof json !== 'object' || json === null || !(field in json));
	throw new ProblemError(
		field || 'claim',
		missing ? 'is missing' : (issue?.message ?? 'is malformed')
	);
}
