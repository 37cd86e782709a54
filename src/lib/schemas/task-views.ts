/** Tasks, submissions and comparisons with the paper, as pages and the API get them. */
import type { Relation, VerdictStatus } from '../ledger/claim';
import type { NoticeKind } from '../ledger/notices';
import type { SubmissionKind, SubmissionState, TaskKind, TaskState } from '../ledger/tasks';
import type { ReferenceView, SubjectView } from './views';

/** What a ledger's row says of its task. */
export interface TaskMark {
	readonly number: number;
	readonly kind: TaskKind;
	readonly state: TaskState;
	/** A name; null: open to all. */
	readonly assignee: string | null;
	/** `YYYY-MM-DD`. */
	readonly dueOn: string | null;
	readonly overdue: boolean;
	/** Further active tasks on the same claim. */
	readonly more: number;
}

export interface PersonView {
	readonly id: string;
	readonly name: string;
}

export interface TaskRow {
	readonly id: string;
	readonly groupSlug: string;
	readonly groupName: string;
	readonly number: number;
	readonly version: number;
	readonly kind: TaskKind;
	readonly state: TaskState;
	readonly assignee: PersonView | null;
	readonly dueOn: string | null;
	readonly overdue: boolean;
	readonly instructions: string;
	/** Why it was returned or cancelled last. */
	readonly reason: string;
	readonly createdBy: PersonView;
	readonly createdAt: string;
	readonly updatedAt: string;
	readonly claim: {
		readonly id: string;
		readonly number: number;
		readonly quantityLabel: string;
		readonly subject: SubjectView;
		readonly relation: Relation;
		readonly printed: string;
		readonly status: VerdictStatus;
		readonly reference: string;
		readonly locator: string;
	};
}

export interface EvidenceFileView {
	readonly id: string;
	readonly name: string;
	readonly mediaType: string;
	readonly bytes: number;
	readonly sha256: string;
}

export interface SubmissionView {
	readonly id: string;
	readonly kind: SubmissionKind;
	readonly state: SubmissionState;
	readonly relation: Relation;
	/** The value found as typed; empty for other kinds. */
	readonly printed: string;
	/** `Read as 0.25075 to 0.25085`. */
	readonly reading: string | null;
	readonly program: string;
	readonly programVersion: string;
	readonly method: string;
	readonly comment: string;
	/** Of a certificate: what the check said of it. */
	readonly check: {
		readonly accepted: boolean;
		readonly label: string;
		readonly lower: string | null;
		readonly upper: string | null;
		readonly exact: string | null;
		readonly note: string;
	} | null;
	/** Of a comparison with the paper. */
	readonly transcription: TranscriptionCheckView | null;
	readonly files: readonly EvidenceFileView[];
	readonly by: PersonView;
	readonly at: string;
	readonly decidedBy: PersonView | null;
	readonly decidedAt: string | null;
	/** Why it was returned, or what convinced whoever accepted it. */
	readonly decision: string;
	/** The same as safe HTML. */
	readonly decisionHtml: string;
	/** False when the claim is about something else since. */
	readonly current: boolean;
}

/** A submission that a claim's verdict rests on, or rested on, with the task it was for. */
export interface ClaimReproduction extends SubmissionView {
	readonly taskNumber: number;
}

/** A task as a claim's page shows it: what is asked and why it came back, as safe HTML. */
export interface ClaimTask extends TaskRow {
	readonly instructionsHtml: string;
	readonly reasonHtml: string;
}

/** A task's page: its row, its tries (oldest first), and what the viewer may do. */
export interface TaskView extends ClaimTask {
	readonly submissions: readonly SubmissionView[];
	/** The viewer has it. */
	readonly own: boolean;
	readonly may: {
		readonly take: boolean;
		readonly start: boolean;
		readonly submit: boolean;
		readonly release: boolean;
		readonly decide: boolean;
		readonly edit: boolean;
		readonly cancel: boolean;
	};
	/** Why a maintainer may not decide: the submission is their own. */
	readonly ownSubmission: boolean;
	/** What a submission may hold, by the task's kind; the first is offered first. */
	readonly submissionKinds: readonly SubmissionKind[];
	/** The viewer may compare this claim with its paper (did not enter or edit it). */
	readonly mayConfirm: boolean;
}

export interface TasksPage {
	readonly rows: readonly TaskRow[];
	readonly total: number;
	readonly page: number;
	readonly pageSize: number;
	/** Tasks in each state that match the filters but the state's. */
	readonly counts: Readonly<Record<TaskState, number>>;
	/** Of the group, for the filter and for assigning. */
	readonly people: readonly PersonView[];
	/** Active tasks of the viewer, and submissions the viewer may decide on. */
	readonly mine: number;
	readonly toDecide: number;
	readonly overdue: number;
}

export interface TranscriptionCheckView {
	readonly by: PersonView;
	readonly at: string;
	readonly claimVersion: number;
	readonly valueMatches: boolean;
	readonly locatorMatches: boolean;
	readonly inequalityMatches: boolean;
	readonly note: string;
	/** False when the claim was edited since, or its task was returned. */
	readonly current: boolean;
}

/** How far a claim's transcription is confirmed, newest check first. */
export interface TranscriptionView {
	readonly confirmed: boolean;
	readonly checks: readonly TranscriptionCheckView[];
	/** The viewer entered or edited it, so somebody else has to compare it. */
	readonly ownClaim: boolean;
}

export interface ClaimNoticeView {
	readonly id: string;
	readonly kind: NoticeKind;
	readonly reference: ReferenceView;
	readonly note: string;
	readonly at: string;
}

export interface AuthorMessageView {
	readonly id: string;
	readonly name: string;
	readonly email: string;
	readonly message: string;
	/** The same as safe HTML. */
	readonly messageHtml: string;
	readonly at: string;
	readonly handledBy: PersonView | null;
	readonly handledAt: string | null;
}
