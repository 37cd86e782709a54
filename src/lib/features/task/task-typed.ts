import type { TaskKind } from '../../ledger/tasks';
import { TASK_KINDS } from '../../ledger/tasks';
import type { FieldIssueView } from '../../schemas/field-issue';

/** What a form's action answers when it refuses: what is wrong, and everything that was typed. */
export interface RefusedForm {
	readonly message: string;
	readonly issues: readonly FieldIssueView[];
	readonly typed: Readonly<Record<string, string>>;
}

/** The fields of a task as a form starts with them. */
export interface TaskStart {
	readonly kind: TaskKind;
	readonly assigneeId: string;
	readonly dueOn: string;
	readonly instructions: string;
}

/** What was typed before, where a form came back; else what it is offered with. */
export function taskStart(typed: RefusedForm['typed'] | undefined, offered: TaskStart): TaskStart {
	if (!typed) return offered;
	return {
		kind: TASK_KINDS.find((kind) => kind === typed.kind) ?? offered.kind,
		assigneeId: typed.assigneeId ?? '',
		dueOn: typed.dueOn ?? '',
		instructions: typed.instructions ?? ''
	};
}

/** The sentences about one field. */
export function issuesOf(
	issues: readonly FieldIssueView[] | undefined,
	field: string
): readonly string[] {
	return (issues ?? []).filter((issue) => issue.field === field).map(({ message }) => message);
}

/** The sentence above a refused form: its message, unless it only repeats what stands at a field. */
export function aboveForm(refused: RefusedForm | null | undefined): string | null {
	if (!refused) return null;
	const repeated = refused.issues.some(({ message }) => message === refused.message);
	return repeated
		? 'Nothing is sent yet: a field needs another look, marked below.'
		: refused.message;
}
