import { groupOfFour, joiningLink, type GroupOfFour } from './people';
import type { TestServer } from './server';
import { bibtexOf, claimFields } from './service';
import type { Visitor } from './visitor';

/** What only the group may read, in whatever answer. */
export const SECRET = 'a heron told us in confidence';

export interface MatrixWorld extends GroupOfFour {
	/** A claim of the group on an inequality of its own, entered by its member. */
	readonly number: number;
	readonly claimId: string;
	readonly inequalityId: string;
	readonly referenceId: string;
	/** The run of the group's own claim, and the one of the published claim. */
	readonly recomputationId: string;
	readonly publicRecomputationId: string;
	readonly publicClaimId: string;
	readonly publicInequalityId: string;
	readonly publicReferenceId: string;
	/** A task on the group's own claim, open to all. */
	readonly taskNumber: number;
	/** A joining link that nobody has used. */
	readonly link: string;
}

interface ClaimJson {
	readonly id: string;
	readonly number: number;
	readonly visibility: string;
	readonly verdict: { readonly status: string };
	readonly subject: { readonly inequalityId: string };
	readonly reference: { readonly id: string };
	readonly recomputations: readonly { readonly id: string; readonly certificate: string | null }[];
}

const WAIT_MS = 90_000;

async function settled(visitor: Visitor, path: string): Promise<ClaimJson> {
	const start = Date.now();
	for (;;) {
		const response = await visitor.get(path);
		const claim: ClaimJson = JSON.parse(await response.text());
		if (claim.verdict.status !== 'open' && claim.recomputations.length > 0) return claim;
		if (Date.now() - start > WAIT_MS) throw new Error(`still open: ${JSON.stringify(claim)}`);
		await new Promise((resolve) => setTimeout(resolve, 250));
	}
}

/** A group with a private claim and a published one, both recomputed. */
export async function matrixWorld(server: TestServer): Promise<MatrixWorld> {
	const group = await groupOfFour(server, 'Quarry Row');
	const api = `/api/v1/groups/${group.slug}/claims`;
	const enter = async (fields: object) => {
		const response = await group.member.sendJson('POST', api, fields);
		const text = await response.text();
		if (response.status !== 201) throw new Error(`entering a claim: ${response.status} ${text}`);
		return settled(group.member, response.headers.get('location') ?? '');
	};
	// The largest value a no-signalling box reaches is the sum of the coefficients' sizes.
	const own = await enter(
		claimFields({
			subjectKind: 'expression',
			expression: 'A0 B0 + 2 A0 B1 + 3 A1 B0 - 4 A1 B1',
			indexBase: '0',
			quantity: 'no-signalling',
			printed: '10',
			note: SECRET,
			bibtex: bibtexOf(1)
		})
	);
	const open = await enter(claimFields({ quantity: 'local', printed: '2', bibtex: bibtexOf(2) }));
	const published = await group.maintainer.submit(
		`/g/${group.slug}/claims/${open.number}?/publish`
	);
	if (published.status !== 200) throw new Error(`publishing: ${published.status}`);
	const opened = await group.maintainer.submit(`/g/${group.slug}/tasks/new?/open`, {
		claims: String(own.number),
		instructions: SECRET
	});
	const task = /tasks\/(\d+)$/.exec(opened.headers.get('location') ?? '')?.[1];
	if (!task) throw new Error(`opening a task: ${opened.status}`);
	return {
		...group,
		taskNumber: Number(task),
		number: own.number,
		claimId: own.id,
		inequalityId: own.subject.inequalityId,
		referenceId: own.reference.id,
		recomputationId: own.recomputations[0]?.id ?? '',
		publicRecomputationId: open.recomputations[0]?.id ?? '',
		publicClaimId: open.id,
		publicInequalityId: open.subject.inequalityId,
		publicReferenceId: open.reference.id,
		link: await joiningLink(group.owner, group.slug, 'observer')
	};
}
