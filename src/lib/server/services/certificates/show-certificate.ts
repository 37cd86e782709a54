import { soughtLabel } from '../../../ledger/problem-labels';
import { parseRational } from '../../../nonlocality/exact/rational';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import type { DoneResult } from '../../../nonlocality/problem';
import type { CertificateView } from '../../../schemas/certificate-view';
import { eq } from 'drizzle-orm';
import type { Context } from '../../context';
import { recomputations, results } from '../../db/schema';
import { ServiceError } from '../../errors';
import { typeset } from '../../math/typeset';
import { latexOf, textOf } from '../claims/subject-latex';
import { mapSides, readMap, showSides, IDENTITY_TEXT } from '../inequalities/affine';
import { requireVisible } from '../recomputations/find-visible';
import { problemLabel } from '../recomputations/problem-label';
import { explainCertificate } from './explain-certificate';

/**
 * What a recomputation's certificate says and how it proves it, in words and sizes; the certificate
 * itself is a download.
 * @throws ServiceError not-found, also while there is no result
 */
export async function showCertificate(ctx: Context, id: string): Promise<CertificateView> {
	await requireVisible(ctx, id);
	const [row] = await ctx.db.read
		.select({
			result: results.result,
			checked: recomputations.checked,
			checkNote: recomputations.checkNote
		})
		.from(results)
		.innerJoin(recomputations, eq(recomputations.id, results.recomputationId))
		.where(eq(results.recomputationId, id));
	if (!row) throw new ServiceError('not-found', 'This recomputation has no result yet.');
	const { result, checked, checkNote } = row;
	const { problem, certificate, solver } = result;
	const functional = functionalOfTerms(problem.outputs, problem.terms);
	const latex = latexOf(functional, 0);
	return {
		id,
		label: problemLabel(problem),
		quantity: soughtLabel(problem),
		formulaHtml: latex === null ? null : typeset(latex, true),
		formula: textOf(functional),
		proves: provedWords(result),
		checked: checked === true,
		method: checkNote ?? '',
		solver,
		bytes: Buffer.byteLength(JSON.stringify(certificate)),
		hasSdpa: problem.quantity === 'npa',
		explanation: certificate && explainCertificate(certificate)
	};
}

function provedWords({ lower, upper, exact, guaranteed }: DoneResult): string {
	const rational = exact === null ? null : parseRational(exact);
	const sides = showSides(
		mapSides(readMap(IDENTITY_TEXT), {
			lower: guaranteed.lower ? lower : null,
			upper: guaranteed.upper ? upper : null,
			exact: rational && exact
		})
	);
	if (sides.lower !== null && sides.lower === sides.upper) return `exactly ${sides.lower}`;
	const words = [
		sides.lower !== null && `at least ${sides.lower}`,
		sides.upper !== null && `at most ${sides.upper}`
	].filter((side) => side !== false);
	return words.length > 0 ? words.join(' and ') : 'nothing';
}
