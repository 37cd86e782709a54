import { z } from 'zod';
import { RELATIONS } from '../ledger/claim';
import { SUBMISSION_KINDS, TASK_KINDS, TASK_STATE_FILTERS } from '../ledger/tasks';

export const TASK_LIMITS = {
	instructions: 4_000,
	line: 300,
	comment: 10_000,
	/** A strategy or certificate in the problem format. */
	certificate: 2_000_000,
	/** Tasks opened at once from the ledger. */
	claims: 100,
	files: 5,
	fileBytes: 10_000_000,
	/** All evidence of a group together. */
	groupBytes: 1_000_000_000
} as const;

const text = (limit: number) =>
	z
		.string()
		.trim()
		.max(limit, `At most ${limit.toLocaleString('en')} characters`)
		.default('');

/** A date that exists, or nothing. */
const day = z
	.union([z.literal(''), z.iso.date('Write the date as year-month-day, such as 2026-12-14')])
	.default('');

const taskFields = z.object({
	kind: z.enum(TASK_KINDS).default('recompute'),
	/** A member's id; empty: open to all. */
	assigneeId: text(40),
	dueOn: day,
	instructions: text(TASK_LIMITS.instructions)
});

export const openTasksInput = taskFields.extend({
	/** Numbers of the group's claims; a task is opened on each. */
	claims: z
		.array(z.coerce.number().int().min(1))
		.min(1, 'Choose at least one claim')
		.max(TASK_LIMITS.claims, `At most ${TASK_LIMITS.claims} claims at once`)
});
export type OpenTasksInput = z.infer<typeof openTasksInput>;

export const editTaskInput = taskFields.extend({ version: z.coerce.number().int() });
export type EditTaskInput = z.infer<typeof editTaskInput>;

const answer = z.enum(['', 'yes', 'no']).default('');

/** Flat, so that the form works without JavaScript; which fields count depends on `kind`. */
export const submitInput = z.object({
	kind: z.enum(SUBMISSION_KINDS).default('value'),
	relation: z.enum(RELATIONS).default('='),
	printed: text(200),
	program: text(TASK_LIMITS.line),
	programVersion: text(TASK_LIMITS.line),
	method: text(TASK_LIMITS.line),
	comment: text(TASK_LIMITS.comment),
	certificate: text(TASK_LIMITS.certificate),
	valueMatches: answer,
	locatorMatches: answer,
	inequalityMatches: answer
});
export type SubmitInput = z.infer<typeof submitInput>;

export const submissionInput = submitInput.extend({
	/** The version of the claim that the form stood beside; left out by who has seen none. */
	claimVersion: z.coerce.number().int().optional()
});
export type SubmissionInput = z.infer<typeof submissionInput>;

/** A comparison with the paper, from a claim's page. */
export const transcriptionInput = submitInput
	.pick({ valueMatches: true, locatorMatches: true, inequalityMatches: true })
	.extend({ note: text(TASK_LIMITS.comment), version: z.coerce.number().int() });
export type TranscriptionInput = z.infer<typeof transcriptionInput>;

export const TASK_SORTS = ['due', 'newest', 'changed', 'number'] as const;

export const TASK_PAGE_SIZE = 50;
/** A board shows its columns whole, as far as one can still look over them. */
export const TASK_BOARD_SIZE = 200;

/** State of the task table and board, all of it in the URL. */
const taskQuery = z.object({
	view: z.enum(['table', 'board']).catch('table'),
	state: z.enum(TASK_STATE_FILTERS).catch('active'),
	kind: z.enum(['', ...TASK_KINDS]).catch(''),
	/** `me`, `nobody`, a person's id; empty: anyone. */
	assignee: z.string().max(40).catch(''),
	overdue: z.boolean().catch(false),
	search: z.string().trim().max(200).catch(''),
	sort: z.enum(TASK_SORTS).catch('due'),
	page: z.coerce.number().int().min(1).max(100_000).catch(1)
});
export type TaskQuery = z.infer<typeof taskQuery>;

export function parseTaskQuery(parameters: URLSearchParams): TaskQuery {
	return taskQuery.parse({
		view: parameters.get('view') ?? 'table',
		state: parameters.get('state') ?? 'active',
		kind: parameters.get('kind') ?? '',
		assignee: parameters.get('assignee') ?? '',
		overdue: parameters.get('overdue') === '1',
		search: parameters.get('q') ?? '',
		sort: parameters.get('sort') ?? 'due',
		page: parameters.get('page') ?? 1
	});
}

/** The query as it stands in the URL, defaults left out. */
export function printTaskQuery(query: TaskQuery): URLSearchParams {
	const out = new URLSearchParams();
	if (query.view !== 'table') out.set('view', query.view);
	if (query.search) out.set('q', query.search);
	if (query.state !== 'active') out.set('state', query.state);
	if (query.kind) out.set('kind', query.kind);
	if (query.assignee) out.set('assignee', query.assignee);
	if (query.overdue) out.set('overdue', '1');
	if (query.sort !== 'due') out.set('sort', query.sort);
	if (query.page > 1) out.set('page', String(query.page));
	return out;
}
