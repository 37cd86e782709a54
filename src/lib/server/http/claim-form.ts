import { fail, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { setError, superValidate, type SuperValidated } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { clientAddress } from '../client-address';
import type { ClaimFormMessage } from '../../features/claim-form/form-message';
import { claimInput, type ClaimInput } from '../../schemas/claim-input';
import type { InequalityRow, ReadingView } from '../../schemas/views';
import { enter } from '../auth/enter';
import { contextOf } from '../auth/guards';
import type { GroupContext } from '../context';
import { ServiceError } from '../errors';
import { showClaim } from '../services/claims/show-claim';
import { searchInequalities } from '../services/inequalities/search-inequalities';
import { readClaim } from '../services/readings/read-claim';
import { listReferences } from '../services/references/list-references';
import { signIn } from '../services/users/sign-in';

export type ClaimForm = SuperValidated<ClaimInput, ClaimFormMessage>;

/** What the form offers to choose from, and what was understood of it so far. */
export interface ClaimFormChoices {
	readonly known: readonly InequalityRow[];
	readonly papers: readonly { readonly id: string; readonly formatted: string }[];
	readonly reading: ReadingView | null;
}

export const NO_CHOICES: ClaimFormChoices = { known: [], papers: [], reading: null };

const FORM_ID = 'claim';
const MARKED_BELOW = 'Nothing was entered yet: some fields need another look, marked below.';

/** The form as sent, checked by the schema only. */
export async function readClaimForm(data: FormData): Promise<ClaimForm> {
	return superValidate<ClaimInput, ClaimFormMessage>(data, zod4(claimInput), { id: FORM_ID });
}

export async function claimFormOf(start: Partial<ClaimInput>): Promise<ClaimForm> {
	return superValidate<ClaimInput, ClaimFormMessage>(start, zod4(claimInput), {
		id: FORM_ID,
		errors: false
	});
}

/**
 * What the address asks the form to start from: another claim's paper and inequality, or either.
 * @throws ServiceError not-found when there is no such claim
 */
export async function claimFormStart(
	ctx: GroupContext,
	asked: URLSearchParams
): Promise<Partial<ClaimInput>> {
	const from = Number(asked.get('from'));
	if (Number.isInteger(from) && from > 0) {
		const { input, reference } = await showClaim(ctx, from);
		const kept = { paper: 'known' as const, referenceId: reference.id };
		return { ...input, ...kept, bibtex: '', printed: '', locator: '', note: '' };
	}
	const inequalityId = asked.get('inequality');
	const referenceId = asked.get('paper');
	return {
		...(inequalityId ? { subjectKind: 'known', inequalityId } : {}),
		...(referenceId ? { paper: 'known', referenceId } : {})
	};
}

export async function claimFormChoices(
	ctx: GroupContext,
	input: ClaimInput,
	begun: boolean
): Promise<ClaimFormChoices> {
	const [known, references, reading] = await Promise.all([
		searchInequalities(ctx, ''),
		listReferences(ctx),
		begun ? readClaim(ctx, input) : null
	]);
	return { known, papers: references.map(({ id, formatted }) => ({ id, formatted })), reading };
}

/** Sends the form back, filled as it was, with what there is to say. */
function sendBack(form: ClaimForm, status: number, message: ClaimFormMessage) {
	form.message = message;
	form.valid = false;
	return fail(status, { form });
}

/** What is wrong at its fields; anything unexpected goes on. */
export function refuseClaim(form: ClaimForm, thrown: unknown) {
	if (!(thrown instanceof ServiceError)) throw thrown;
	const shown = thrown.issues.filter(({ field }) => field in form.data);
	for (const { field, message } of shown) setError(form, field as keyof ClaimInput, message);
	const text = shown.length > 0 ? MARKED_BELOW : thrown.message;
	return sendBack(form, thrown.status, { text, issues: [...thrown.issues] });
}

/** The schema alone refused it. */
export function refuseInvalid(form: ClaimForm) {
	return sendBack(form, 400, { text: MARKED_BELOW, issues: [] });
}

/** The session has ended: the filled form goes back, with a way to sign in inside it. */
export function askToSignIn(form: ClaimForm) {
	const text =
		'Your session has ended, so nothing was entered yet. Sign in, then send the form again.';
	return sendBack(form, 401, { text, issues: [], signedOut: true });
}

/** What a button of the form asks for instead of entering it. */
const READ_ONLY = ['read', 'take-bound'] as const;

/**
 * Sends the form back with what was understood of it, where a button asked for that only; with the
 * bound behind the expression as its value, where a person took that over. Null: it is to be entered.
 */
export async function readOnly(ctx: GroupContext, form: ClaimForm, data: FormData) {
	const asked = READ_ONLY.find((button) => button === data.get('then'));
	if (!asked) return null;
	let reading = await readClaim(ctx, form.data);
	const bound = reading.besideIt;
	if (asked === 'take-bound' && bound) {
		form.data.printed = bound.text;
		form.data.relation = bound.relation;
		reading = await readClaim(ctx, form.data);
	}
	form.errors = {};
	form.message = { text: '', issues: [...reading.issues], reading };
	return { form };
}

/** The version the person started from goes back with the form, so that a later one is noticed. */
export function keepVersion<T extends object>(answer: ActionFailure<T>, version: number) {
	return fail(answer.status, { ...answer.data, version });
}

/** Signs in from within a claim's form; what was typed stays. */
export async function signInWithinForm(event: RequestEvent, data: FormData) {
	const form = await readClaimForm(data);
	const text = (name: string) => String(data.get(name) ?? '');
	try {
		const credentials = { email: text('signInEmail'), password: text('signInPassword') };
		await enter(event, await signIn(contextOf(event), credentials, clientAddress(event)));
	} catch (thrown) {
		if (!(thrown instanceof ServiceError)) throw thrown;
		return sendBack(form, thrown.status, { text: thrown.message, issues: [], signedOut: true });
	}
	form.message = {
		text: 'Signed in. Nothing is entered yet: check the form and send it.',
		issues: [],
		signedIn: true
	};
	return { form };
}

/** The same in the form of an edit, which keeps the version it started from. */
export async function signInWithinEdit(event: RequestEvent) {
	const data = await event.request.formData();
	const version = Number(data.get('version'));
	const answer = await signInWithinForm(event, data);
	return 'status' in answer ? keepVersion(answer, version) : { ...answer, version };
}
