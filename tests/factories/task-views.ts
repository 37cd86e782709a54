import type {
	SubmissionView,
	TaskMark,
	TaskRow,
	TasksPage,
	TaskView
} from '../../src/lib/schemas/task-views';

/** Views of invented tasks on a claim of CHSH, to be changed where a test needs it. */
export function makeTaskMark(over: Partial<TaskMark> = {}): TaskMark {
	return {
		number: 4,
		kind: 'recompute',
		state: 'assigned',
		assignee: 'Mo Member',
		dueOn: null,
		overdue: false,
		more: 0,
		...over
	};
}

export function makeTaskRow(over: Partial<TaskRow> = {}): TaskRow {
	return {
		id: '01900000-0000-7000-8000-0000000000a1',
		groupSlug: 'a',
		groupName: 'Reading group',
		number: 4,
		version: 1,
		kind: 'recompute',
		state: 'assigned',
		assignee: { id: 'mo', name: 'Mo Member' },
		dueOn: '2026-12-14',
		overdue: false,
		instructions: 'Level 3 with another solver.',
		reason: '',
		createdBy: { id: 'mae', name: 'Mae Maintainer' },
		createdAt: '2026-12-01T09:00:00.000Z',
		updatedAt: '2026-12-01T09:00:00.000Z',
		claim: {
			id: 'c1',
			number: 12,
			quantityLabel: 'Quantum maximum',
			subject: {
				inequalityId: 'i1',
				text: 'CHSH',
				html: null,
				latex: null,
				scenario: '2 in, 2 out'
			},
			relation: '=',
			printed: '2.8284',
			status: 'open',
			reference: 'Arden & Voss 2004',
			locator: 'eq. 7'
		},
		...over
	};
}

export function makeSubmission(over: Partial<SubmissionView> = {}): SubmissionView {
	return {
		id: 's1',
		kind: 'value',
		state: 'waiting',
		relation: '=',
		printed: '0.2508',
		reading: 'Read as 0.25075 to 0.25085',
		program: 'Own script',
		programVersion: '1.2',
		method: 'level 3',
		comment: '',
		check: null,
		transcription: null,
		files: [],
		by: { id: 'mo', name: 'Mo Member' },
		at: '2026-12-01T10:00:00.000Z',
		decidedBy: null,
		decidedAt: null,
		decision: '',
		decisionHtml: '',
		current: true,
		...over
	};
}

export function makeTaskView(over: Partial<TaskView> = {}): TaskView {
	return {
		...makeTaskRow(),
		submissions: [],
		instructionsHtml: '<p>Level 3 with another solver.</p>',
		reasonHtml: '',
		own: false,
		may: {
			take: false,
			start: false,
			submit: false,
			release: false,
			decide: false,
			edit: false,
			cancel: false
		},
		ownSubmission: false,
		submissionKinds: ['value', 'certificate', 'statement'],
		mayConfirm: true,
		...over
	};
}

export function makeTasksPage(over: Partial<TasksPage> = {}): TasksPage {
	const rows = over.rows ?? [makeTaskRow()];
	return {
		rows,
		total: rows.length,
		page: 1,
		pageSize: 50,
		counts: {
			open: 0,
			assigned: rows.length,
			'in-progress': 0,
			submitted: 0,
			returned: 0,
			accepted: 0,
			cancelled: 0
		},
		people: [
			{ id: 'mae', name: 'Mae Maintainer' },
			{ id: 'mo', name: 'Mo Member' }
		],
		mine: 1,
		toDecide: 0,
		overdue: 0,
		...over
	};
}
