import { and, count, eq, ne } from 'drizzle-orm';
import { readingEnd } from '../../../ledger/reading-text';
import type { StatedValue } from '../../../ledger/stated-value';
import { claimInput, type ClaimInput } from '../../../schemas/claim-input';
import type { ReadingView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims, inequalities } from '../../db/schema';
import type { FieldIssue } from '../../errors';
import { typeset } from '../../math/typeset';
import { readClaimInput, type ReadClaimInput } from '../claims/read-claim-input';
import { IDENTITY_TEXT, readMap } from '../inequalities/affine';
import { isIdentity, mapBetween, type CanonicalSubject } from '../inequalities/canonical-subject';
import { mapWords } from '../inequalities/claim-normalisations';
import { familyOfDigest, namesOf } from '../inequalities/catalogue';
import { scenarioSentence } from '../inequalities/scenario-words';
import { loadStations, stationsView } from '../inequalities/stations-view';
import { isVisibleToGroup } from '../inequalities/visibility';
import { parseInput } from '../parse-input';
import { groupBudget } from '../recomputations/budget';
import { describeRecomputation } from './describe-recomputation';

/**
 * What the product understands of a form that is being filled in: the checks of entering a claim,
 * without complaints about what has not been typed yet. Writes nothing.
 */
export async function readClaim(
	ctx: GroupContext,
	partial: Partial<ClaimInput>
): Promise<ReadingView> {
	const { input, issues } = parseWhatFits(partial);
	const read = await readClaimInput(ctx, input);
	const { subject, place, stated, paper } = read;
	const functional = subject?.functional ?? null;
	const known = place && (await findKnown(ctx, place));
	const seconds = await groupBudget(ctx.db.read, ctx.group.id);
	return {
		formulaHtml: subject?.latex ? typeset(subject.latex, true) : null,
		latex: subject?.latex ?? null,
		scenario: functional && scenarioSentence(functional.scenario.outputs),
		indexBase: subject?.indexBase ?? null,
		notation: subject?.notation ?? null,
		besideIt: subject?.besideIt ?? null,
		knownAs: known?.knownAs ?? null,
		stations: known?.stations ?? null,
		value: stated?.text ?? null,
		valueRange: stated && rangeOf(stated),
		recomputedBy: describeRecomputation(input, read, seconds),
		reference: paper && (paper.kind === 'known' ? paper.formatted : paper.parsed.formatted),
		issues: [...issues, ...typedIssues(input, read)]
	};
}

/** A field that the schema refuses is named and left out, so that the rest is still read. */
function parseWhatFits(partial: Partial<ClaimInput>): {
	input: ClaimInput;
	issues: readonly FieldIssue[];
} {
	const parsed = claimInput.safeParse(partial);
	if (parsed.success) return { input: parsed.data, issues: [] };
	const issues = parsed.error.issues.map(({ path, message }) => ({
		field: String(path[0] ?? ''),
		message
	}));
	const refused = new Set(issues.map(({ field }) => field));
	const rest = Object.entries(partial).filter(([field]) => !refused.has(field));
	return { input: parseInput(claimInput, Object.fromEntries(rest)), issues };
}

const rangeOf = ({ low, high }: StatedValue) => ({
	low: readingEnd(low, 'lower'),
	high: readingEnd(high, 'upper')
});

/** A field still empty is not wrong yet. */
function typedIssues(input: ClaimInput, { issues }: ReadClaimInput): readonly FieldIssue[] {
	return issues.filter(({ field }) => {
		const value: unknown = Reflect.get(input, field);
		if (field === 'familyParameter') return input.family !== '' && value !== '';
		return typeof value === 'string' ? value.trim() !== '' : true;
	});
}

/** The inequality that is equivalent to what is being entered, where this group may know of it. */
async function findKnown(
	ctx: GroupContext,
	place: CanonicalSubject
): Promise<Pick<ReadingView, 'knownAs' | 'stations'> | null> {
	const { read } = ctx.db;
	const [row] = await read
		.select()
		.from(inequalities)
		.where(
			and(eq(inequalities.digestVersion, place.version), eq(inequalities.digest, place.digest))
		);
	if (!row || !(await isVisibleToGroup(read, row.id, ctx.group.id))) return null;
	const map = mapBetween(row, place);
	const stations = (await loadStations(read, [row.id])).get(row.id) ?? [];
	const [own] = await read
		.select({ claims: count() })
		.from(claims)
		.where(
			and(
				eq(claims.inequalityId, row.id),
				eq(claims.groupId, ctx.group.id),
				ne(claims.state, 'withdrawn')
			)
		);
	const spec = familyOfDigest(row.digest);
	const name = row.name ?? (spec ? namesOf(spec).name : 'An inequality of this group');
	return {
		knownAs: {
			id: row.id,
			name,
			claims: own?.claims ?? 0,
			map: isIdentity(map) ? null : mapWords(map)
		},
		stations:
			stations.length > 0 ? stationsView(stations, readMap({ ...IDENTITY_TEXT, ...map })) : null
	};
}
