import { and, asc, eq, inArray, isNotNull, ne, or, type SQL } from 'drizzle-orm';
import { collinsGisinTableOf, functionalIn } from './collins-gisin-table';
import type { InequalityView } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { claims, recomputations } from '../../db/schema';
import { typeset } from '../../math/typeset';
import { claimRows, selectClaimRows } from '../claims/claim-rows';
import { recomputationViews } from '../recomputations/recomputation-view';
import { isSharedRun } from '../recomputations/shared-run';
import { latexOf } from '../claims/subject-latex';
import { IDENTITY_TEXT, readMap } from './affine';
import { isIdentity, type MapText } from './canonical-subject';
import { claimChoices, claimNormalisations } from './claim-normalisations';
import { inequalitySubject, type InequalityRecord } from './inequality-rows';
import { chooseNormalisation, normalisationChoices } from './normalisations';
import { loadStations, stationSides, stationsView } from './stations-view';

/**
 * The page of one inequality, every value in the chosen normalisation.
 * @param visible which of its claims the viewer may see
 * @param groups whose members look at it; none: anybody
 */
export async function inequalityView(
	read: Reader,
	row: InequalityRecord,
	visible: SQL | undefined,
	normalisation: string | undefined,
	now: Date,
	groups: readonly string[] = []
): Promise<InequalityView> {
	const stations = (await loadStations(read, [row.id])).get(row.id) ?? [];
	const own = stationSides(stations, readMap(IDENTITY_TEXT)).local;
	const local = own.lower && own.upper?.equals(own.lower) ? own.lower : null;
	const onIt = and(eq(claims.inequalityId, row.id), ne(claims.state, 'withdrawn'), visible);
	const selected = await selectClaimRows(read, onIt).orderBy(
		asc(claims.quantity),
		asc(claims.createdAt)
	);
	const published = normalisationChoices(row, local);
	const choices = [...published, ...claimChoices(selected, published)];
	const chosen = chooseNormalisation(choices, normalisation);
	const map = readMap(chosen.map);
	const latex = latexIn(row, chosen.map);
	const asked = read
		.select({ id: claims.recomputationId })
		.from(claims)
		.where(and(onIt, isNotNull(claims.recomputationId)));
	const runs = and(
		eq(recomputations.inequalityId, row.id),
		or(isSharedRun, inArray(recomputations.id, asked))
	);
	return {
		id: row.id,
		subject: inequalitySubject(row),
		parties: row.parties,
		stations: stationsView(stations, map),
		claims: selected.length,
		digest: row.digest,
		latex,
		formulaHtml: latex ? typeset(latex, true) : null,
		outputs: row.outputs,
		degree: Math.max(0, ...row.terms.map(([, events]) => events.length)),
		collinsGisin: collinsGisinTableOf(row, chosen.map),
		normalisation: { key: chosen.key, label: chosen.label },
		normalisations: choices
			.filter((choice) => published.includes(choice) || choice === chosen)
			.map(({ key, label }) => ({ key, label })),
		claimNormalisations: claimNormalisations(selected, choices, chosen),
		recomputations: await recomputationViews(read, runs, map, now),
		claimRows: await claimRows(read, selected, now, groups)
	};
}

/** The formula as the values are shown; empty where it is too long to be read. */
function latexIn(row: InequalityRecord, map: MapText): string {
	return isIdentity(map) ? row.latex : (latexOf(functionalIn(row, map), 0) ?? '');
}
