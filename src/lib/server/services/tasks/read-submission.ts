import { oneLine } from '../../../ledger/one-line';
import { SUBMISSION_KINDS_OF } from '../../../ledger/task-submissions';
import { StatedValueError, claimedRelation, readStatedValue } from '../../../ledger/stated-value';
import { TASK_KIND_LABELS, type TaskKind } from '../../../ledger/tasks';
import type { SubmitInput } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import type { submissions } from '../../db/schema';
import { ServiceError, type FieldIssue } from '../../errors';
import type { ClaimRow } from '../claims/find-claim';
import { readCertificate } from '../submissions/read-certificate';
import { readComparison, type Comparison } from '../transcriptions/read-comparison';

type Columns = Pick<
	typeof submissions.$inferInsert,
	'kind' | 'relation' | 'printed' | 'program' | 'programVersion' | 'method' | 'comment'
> &
	Partial<Pick<typeof submissions.$inferInsert, 'finding' | 'certificate'>>;

export interface ReadSubmission {
	readonly columns: Columns;
	readonly comparison: Comparison | null;
}

/**
 * A submission as it was understood; which fields count depends on its kind.
 * @throws ServiceError invalid, with an issue for each field at fault
 */
export async function readSubmission(
	ctx: GroupContext,
	task: { readonly kind: TaskKind },
	claim: ClaimRow,
	input: SubmitInput,
	files: number
): Promise<ReadSubmission> {
	const { kind, comment } = input;
	if (!SUBMISSION_KINDS_OF[task.kind].includes(kind)) {
		const asked = TASK_KIND_LABELS[task.kind].toLowerCase();
		throw invalid([{ field: 'kind', message: `The task is to ${asked}; answer it as that.` }]);
	}
	const method = methodOf(input);
	const base = { kind, comment, relation: '=', printed: '', ...NO_METHOD } as const;
	switch (kind) {
		case 'value':
			return { columns: { ...base, ...method, ...readValue(input) }, comparison: null };
		case 'certificate': {
			if (!input.certificate) {
				const message = 'Paste the result with its certificate, or choose its file.';
				throw invalid([{ field: 'certificate', message }]);
			}
			const { finding } = await readCertificate(ctx, claim, input.certificate);
			const certificate = input.certificate;
			return { columns: { ...base, ...method, finding, certificate }, comparison: null };
		}
		case 'transcription':
			return { columns: base, comparison: readComparison(input, comment, 'comment') };
		case 'statement':
			if (comment || files > 0) return { columns: { ...base, ...method }, comparison: null };
			throw invalid([{ field: 'comment', message: 'Say what you found, or attach it as a file.' }]);
	}
}

const NO_METHOD = { program: '', programVersion: '', method: '' } as const;

const methodOf = ({ program, programVersion, method }: SubmitInput) => ({
	program: oneLine(program),
	programVersion: oneLine(programVersion),
	method: oneLine(method)
});

function readValue(input: SubmitInput): Pick<Columns, 'printed' | 'relation'> {
	const issues: FieldIssue[] = [];
	const { program, programVersion, method } = methodOf(input);
	const value = readPrinted(input);
	if ('field' in value) issues.push(value);
	if (!program && !method) {
		const message = 'Say how the value was found: a program with its version, or the method.';
		issues.push({ field: 'program', message });
	} else if (program && !programVersion) {
		const message = 'Give the program’s version, or the day or commit where it has none.';
		issues.push({ field: 'programVersion', message });
	}
	if ('field' in value || issues.length > 0) throw invalid(issues);
	return value;
}

function readPrinted({
	printed,
	relation
}: SubmitInput): Pick<Columns, 'printed' | 'relation'> | FieldIssue {
	const field = 'printed';
	if (!printed) return { field, message: 'Give the value you found, with the digits you trust.' };
	try {
		const found = claimedRelation(readStatedValue(printed, 'as-printed'), relation);
		if (found) return { printed: oneLine(printed), relation: found };
		const message = `The value starts with another sign than the relation ${relation}; keep one.`;
		return { field, message, position: 0 };
	} catch (error) {
		if (!(error instanceof StatedValueError)) throw error;
		return { field, message: error.message, position: error.position };
	}
}

function invalid(issues: readonly FieldIssue[]): ServiceError {
	return new ServiceError('invalid', issues[0]?.message ?? 'This is not usable.', issues);
}
