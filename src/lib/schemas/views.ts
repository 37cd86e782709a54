/**
 * What pages, forms and the API get from the services: plain data, ready to show. Figures are
 * decimal strings, already rounded outward; times are ISO 8601 in UTC.
 */
import type { ClaimNormalisationView } from './normalisation-views';
import type { ClaimState, Relation, VerdictStatus, Visibility } from '../ledger/claim';
import type { Role } from '../ledger/roles';
import type { Verdict } from '../ledger/verdict';
import type { ClaimInput } from './claim-input';
import type { NoticeKind } from '../ledger/notices';
import type { ClaimNoticeView, TaskMark } from './task-views';
import type { FieldIssueView } from './field-issue';

/**
 * Values on the rule, in the normalisation of what it is shown beside; null: not known yet. The best
 * that all recomputations of the inequality prove; an exact one may be a fraction, `1/3`.
 */
export interface StationsView {
	readonly local: string | null;
	readonly quantumLower: string | null;
	readonly quantumUpper: string | null;
	readonly almostQuantum: string | null;
	readonly noSignalling: string | null;
	/** False while stations are queued or running. */
	readonly complete: boolean;
}

export interface ProgressView {
	readonly state: 'queued' | 'running' | 'done' | 'failed' | 'cancelled';
	readonly stage: string | null;
	readonly iteration: number | null;
	/** 0 to 1. */
	readonly fraction: number | null;
	readonly lower: string | null;
	readonly upper: string | null;
	readonly seconds: number | null;
	/** Jobs ahead of it in the queue. */
	readonly ahead: number | null;
}

export interface SubjectView {
	readonly inequalityId: string | null;
	/** `CHSH`, or the expression as entered. */
	readonly text: string;
	/** KaTeX output (safe HTML made by the server), or null. */
	readonly html: string | null;
	readonly latex: string | null;
	/** `2 in, 2 out`; empty for a described subject. */
	readonly scenario: string;
}

export interface ReferenceLine {
	readonly id: string;
	/** `Arden & Voss 2004`. */
	readonly short: string;
	readonly doi: string | null;
	readonly locator: string;
}

export interface LedgerRow {
	readonly id: string;
	readonly number: number;
	readonly subject: SubjectView;
	readonly quantityLabel: string;
	readonly relation: Relation;
	readonly printed: string;
	/** The same typeset (safe HTML made by the server), where it is written in LaTeX. */
	readonly printedHtml: string | null;
	readonly verdict: Verdict;
	/** `NPA level 1, see-saw d=2`. */
	readonly recomputedBy: string;
	readonly stations: StationsView | null;
	readonly progress: ProgressView | null;
	readonly reference: ReferenceLine;
	readonly state: ClaimState;
	readonly visibility: Visibility;
	/** What is attached to it after its paper appeared. */
	readonly notices: readonly NoticeKind[];
	/** Compared with its paper and found to differ; never on public pages. */
	readonly disputed: boolean;
	/** The task that waits on it and was changed last; null on public pages and without any. */
	readonly task: TaskMark | null;
	/** Machines do not settle it and no task is under way: one should be opened. */
	readonly wantsTask: boolean;
}

export interface StatusCounts extends Readonly<Record<VerdictStatus, number>> {
	readonly all: number;
}

export interface LedgerPage {
	readonly rows: readonly LedgerRow[];
	/** Rows that match, and those of each status that match all but the status filter. */
	readonly total: number;
	readonly counts: StatusCounts;
	readonly page: number;
	readonly pageSize: number;
	readonly papers: number;
	/** Claims that wait for a maintainer to publish or decline them. */
	readonly proposed: number;
	/** Choices of the filters, with how many claims each has. */
	readonly scenarios: readonly { readonly value: string; readonly count: number }[];
	readonly quantities: readonly {
		readonly value: string;
		readonly label: string;
		readonly count: number;
	}[];
}

export interface RecomputationView {
	readonly id: string;
	/** `NPA level 2`, `See-saw, dimension 2`. */
	readonly label: string;
	/** `28 x 28, 153 moments`. */
	readonly detail: string;
	readonly lower: string | null;
	readonly upper: string | null;
	readonly exact: string | null;
	readonly certificate: string | null;
	readonly checked: boolean | null;
	readonly checkNote: string | null;
	readonly seconds: number | null;
	readonly finishedAt: string | null;
	readonly seed: number | null;
	readonly solver: string | null;
	readonly progress: ProgressView;
	readonly reason: string | null;
	/** True when the problem can be downloaded as SDPA text. */
	readonly hasSdpa: boolean;
}

export interface ReferenceView {
	readonly id: string;
	readonly title: string;
	readonly short: string;
	readonly source: string;
	readonly formatted: string;
	readonly year: number | null;
	readonly doi: string | null;
	readonly arxiv: string | null;
	readonly bibtex: string;
	readonly cslJson: string;
}

export interface HistoryEntry {
	readonly at: string;
	/** Null: the product itself; never a name on a public page. */
	readonly who: string | null;
	/** `Entered`, `Recomputed: Discrepancy`, `Value changed from 2.83 to 2.8284`. */
	readonly text: string;
}

export interface ClaimView {
	readonly id: string;
	readonly number: number;
	readonly version: number;
	readonly groupSlug: string;
	readonly groupName: string;
	readonly subject: SubjectView;
	/** The representative's form of the same inequality, when it differs from what was entered. */
	readonly map: { readonly scale: string; readonly shift: string; readonly name: string } | null;
	readonly quantity: string;
	readonly quantityLabel: string;
	readonly relation: Relation;
	readonly printed: string;
	/** The same typeset (safe HTML made by the server), where it is written in LaTeX. */
	readonly printedHtml: string | null;
	readonly method: string;
	readonly locator: string;
	readonly note: string;
	readonly state: ClaimState;
	readonly visibility: Visibility;
	readonly supersededBy: { readonly number: number; readonly id: string } | null;
	readonly verdict: Verdict;
	/** A second person found value, locator and inequality of this version to be the paper's. */
	readonly confirmed: boolean;
	/** Errata and newer versions of its paper. */
	readonly notices: readonly ClaimNoticeView[];
	readonly stations: StationsView | null;
	readonly progress: ProgressView | null;
	/** Which of the recomputations is of exactly the claimed quantity. */
	readonly recomputationId: string | null;
	readonly recomputations: readonly RecomputationView[];
	readonly reference: ReferenceView;
	readonly history: readonly HistoryEntry[];
	readonly input: ClaimInput;
	/** The sentence about devices, when the quantity calls for it. */
	readonly caution: boolean;
	readonly enteredBy: string;
	readonly enteredAt: string;
	/** The viewer entered it. */
	readonly own: boolean;
}

/** An erratum or a newer version as the public sees it. */
export interface PublicNoticeView extends Pick<ClaimNoticeView, 'kind' | 'note' | 'at'> {
	readonly reference: Pick<
		ReferenceView,
		'title' | 'short' | 'source' | 'formatted' | 'year' | 'doi' | 'arxiv'
	>;
}

/** What the pages of a claim, the group's and the public one, have in common. */
export type SharedClaimView = Omit<
	ClaimView,
	'input' | 'note' | 'enteredBy' | 'groupSlug' | 'number' | 'own' | 'notices'
>;

/** A public claim: nothing of who entered it, of notes, or of the group's other data. */
export interface PublicClaimView extends SharedClaimView {
	readonly notices: readonly PublicNoticeView[];
	/** How a discrepancy is to be read; null for other verdicts. */
	readonly wording: string | null;
	/** When what a person found was accepted, where the verdict rests on it; never who. */
	readonly reproducedAt: string | null;
}

/** What a page that watches a claim polls or streams; the page reloads its data when it changes. */
export interface ClaimProgressView {
	readonly number: number;
	/** Changes whenever anything shown of the claim changes. */
	readonly stamp: string;
	readonly verdict: Verdict;
	readonly progress: ProgressView | null;
	readonly stations: StationsView | null;
	readonly recomputations: readonly RecomputationView[];
	/** True when nothing is queued or running any more for this claim or its stations. */
	readonly settled: boolean;
}

/** A paper in the group's list. */
export interface ReferenceRow extends ReferenceView {
	readonly claims: number;
}

export interface ReferencePage extends ReferenceRow {
	readonly claimRows: readonly LedgerRow[];
}

/** A paper as the public sees it, with its published claims. */
export interface PublicReferencePage extends ReferenceView {
	/** Of its public claims. */
	readonly notices: readonly PublicNoticeView[];
	readonly claimRows: readonly LedgerRow[];
}

export interface InequalityRow {
	readonly id: string;
	readonly subject: SubjectView;
	readonly parties: number;
	readonly stations: StationsView;
	/** Claims the viewer may see. */
	readonly claims: number;
}

export interface NormalisationView {
	/** Value of the URL parameter. */
	readonly key: string;
	readonly label: string;
}

export interface InequalityView extends InequalityRow {
	readonly digest: string;
	readonly latex: string;
	/** The formula in the normalisation shown, typeset; null when it can't be. */
	readonly formulaHtml: string | null;
	/** `outputs[party][input]`. */
	readonly outputs: readonly (readonly number[])[];
	/** The most parties in one of its terms: a relaxation of level k has moments of 2 k. */
	readonly degree: number;
	/** Collins-Gisin table of a two-party inequality, exact entries as text. */
	readonly collinsGisin: readonly (readonly string[])[] | null;
	readonly normalisation: NormalisationView;
	readonly normalisations: readonly NormalisationView[];
	readonly claimNormalisations: readonly ClaimNormalisationView[];
	readonly recomputations: readonly RecomputationView[];
	readonly claimRows: readonly LedgerRow[];
}

export interface BoundsRow {
	readonly inequality: SubjectView & { readonly id: string };
	readonly parties: number;
	readonly local: string | null;
	readonly noSignalling: string | null;
	/** From published claims in Agreement. */
	readonly claimedLower: BoundSource | null;
	readonly claimedUpper: BoundSource | null;
	/** From our own recomputations. */
	readonly ownLower: string | null;
	readonly ownUpper: string | null;
	/** upper - lower of the own bounds, rounded up; `closed` when at most 1e-7 of the value. */
	readonly gap: string | null;
	readonly closed: boolean;
	readonly stations: StationsView;
}

export interface BoundSource {
	readonly printed: string;
	/** The same typeset (safe HTML made by the server), where it is written in LaTeX. */
	readonly printedHtml: string | null;
	/** What the paper claims where it is not the quantum maximum itself: `Local maximum`. */
	readonly quantityLabel: string | null;
	readonly claimId: string;
	readonly referenceId: string;
	readonly short: string;
	readonly year: number | null;
}

export interface BoundsPage {
	readonly rows: readonly BoundsRow[];
	readonly counts: StatusCounts;
	readonly total: number;
	readonly page: number;
	readonly pageSize: number;
}

/** Answer of POST /api/v1/readings: what the product understood of a half-filled form. */
export interface ReadingView {
	readonly formulaHtml: string | null;
	readonly latex: string | null;
	/** `2 parties, 2 inputs each, 2 outputs`. */
	readonly scenario: string | null;
	/** 0 or 1, and whether it was read or chosen; null where indices play no part. */
	readonly indexBase: { readonly base: 0 | 1; readonly chosen: boolean } | null;
	/** How the subject is written: `Expression pasted as LaTeX, in observables`. */
	readonly notation: string | null;
	/** `<= 2` behind the expression: no part of the functional; offered as the value, never taken. */
	readonly besideIt: { readonly relation: Relation; readonly text: string } | null;
	readonly knownAs: {
		readonly id: string;
		readonly name: string;
		readonly claims: number;
		/** What is entered = scale * it + shift; null when it is the same. */
		readonly map: string | null;
	} | null;
	readonly stations: StationsView | null;
	/** `Read as 2.82835 to 2.82845`. */
	readonly value: string | null;
	readonly valueRange: { readonly low: string; readonly high: string } | null;
	/** `Will be recomputed by ...`, or why it can't be. */
	readonly recomputedBy: string | null;
	readonly reference: string | null;
	readonly issues: readonly FieldIssueView[];
}

export interface GroupView {
	readonly id: string;
	readonly slug: string;
	readonly name: string;
	readonly description: string;
	readonly role: Role;
}

export interface MemberView {
	readonly id: string;
	readonly name: string;
	readonly email: string;
	readonly role: Role;
	readonly since: string;
}

/** What became of the mail of an invitation. */
export type InvitationMail = 'waiting' | 'sent' | 'failed';

export interface InvitationView {
	readonly id: string;
	readonly role: Role;
	/** Where it was mailed to; null for a link that is passed on. */
	readonly email: string | null;
	readonly createdBy: string;
	readonly expiresAt: string;
	/** Of the last mail; null for a link. */
	readonly mail: InvitationMail | null;
	/** Whether the viewer may mail it again. */
	readonly mayResend: boolean;
}

export interface SettingsView {
	readonly name: string;
	readonly description: string;
	/** Null: the site's. */
	readonly budgetSeconds: number | null;
	readonly siteBudgetSeconds: number;
	readonly slug: string;
	/** Addresses that lead to this one. */
	readonly formerSlugs: readonly string[];
	/** Differs when any setting does. */
	readonly version: string;
	readonly mayChangeAddress: boolean;
}

/** A place where one is signed in. */
export interface SessionView {
	readonly id: string;
	readonly startedAt: string;
	readonly expiresAt: string;
	readonly current: boolean;
}
