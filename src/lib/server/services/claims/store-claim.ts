import { oneLine } from '../../../ledger/one-line';
import type { ClaimInput } from '../../../schemas/claim-input';
import { toDouble } from '../../../nonlocality/exact/rational';
import { termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import type { claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import type { MapText } from '../inequalities/canonical-subject';
import { findOrCreateInequality, queueStations } from '../inequalities/find-or-create-inequality';
import { budgetSeconds, groupBudget } from '../recomputations/budget';
import { claimProblem } from '../recomputations/claim-problem';
import { queueRecomputation } from '../recomputations/queue-recomputation';
import type { ProblemSubjectData } from '../recomputations/station-problems';
import { addReference } from '../references/add-reference';
import type { ReadClaimInput } from './read-claim-input';

/** A claim's form in which nothing is wrong. */
export type SoundClaim = {
	readonly [K in 'subject' | 'stated' | 'paper']: NonNullable<ReadClaimInput[K]>;
} & Pick<ReadClaimInput, 'place' | 'quantity' | 'relation'>;

/** @throws ServiceError invalid with every issue, when there is one */
export function requireSound(read: ReadClaimInput): SoundClaim {
	const { subject, stated, paper, place, quantity, relation, issues } = read;
	if (issues.length > 0 || !subject || !stated || !paper) {
		throw new ServiceError('invalid', issues[0]?.message ?? 'This claim is incomplete.', issues);
	}
	return { subject, stated, paper, place, quantity, relation };
}

type ClaimColumns = Omit<
	typeof claims.$inferInsert,
	'id' | 'groupId' | 'number' | 'createdBy' | 'createdAt' | 'verdict'
>;

/**
 * Writes what a claim rests on (paper, inequality with its stations, recomputation) and returns
 * the claim's own columns; the same for a new claim and for an edited one.
 */
export async function storeClaimParts(
	tx: Transaction,
	ctx: GroupContext,
	input: ClaimInput,
	claim: SoundClaim
): Promise<ClaimColumns> {
	const now = ctx.now();
	const { subject, stated, paper, quantity, relation } = claim;
	const referenceId =
		paper.kind === 'known'
			? paper.id
			: (await addReference(tx, ctx, paper.bibtex, paper.parsed)).id;
	const recomputed = await storeSubject(tx, ctx, input, claim, now);
	return {
		input,
		...recomputed,
		subject: subject.text,
		subjectLatex: subject.latex,
		quantity: input.quantity,
		quantityLabel: quantity.label,
		relation,
		printed: oneLine(input.printed),
		reading: input.reading,
		sortValue: toDouble(stated.value),
		method: oneLine(input.method),
		referenceId,
		locator: oneLine(input.locator),
		note: input.note.trim(),
		updatedAt: now
	};
}

interface StoredSubject extends MapText {
	readonly inequalityId: string | null;
	readonly recomputationId: string | null;
	readonly otherBaseRecomputationId: string | null;
}

async function storeSubject(
	tx: Transaction,
	ctx: GroupContext,
	input: ClaimInput,
	{ subject, place, quantity }: SoundClaim,
	now: Date
): Promise<StoredSubject> {
	const { functional, latex, family } = subject;
	if (!functional || !place) {
		const none = { inequalityId: null, recomputationId: null, otherBaseRecomputationId: null };
		return { ...none, scale: '1', shift: '0' };
	}
	const placed = { functional, latex: latex ?? '', family, place };
	const inequality = await findOrCreateInequality(tx, placed, now);
	await queueStations(tx, inequality, ctx.group.id, budgetSeconds(), now);
	const seconds = await groupBudget(tx, ctx.group.id);
	const queue = async (about: ProblemSubjectData, inequalityId: string | null) => {
		const found = claimProblem(input, quantity, about, seconds);
		if ('why' in found) return null;
		const queued = { problem: found.problem, inequalityId, groupId: ctx.group.id };
		return queueRecomputation(tx, queued, now);
	};
	const { id: inequalityId, map } = inequality;
	const { otherBase } = subject;
	return {
		inequalityId,
		recomputationId: await queue(inequality, inequalityId),
		otherBaseRecomputationId: otherBase
			? await queue(
					{ outputs: otherBase.scenario.outputs, terms: termsOfFunctional(otherBase) },
					null
				)
			: null,
		...map
	};
}
