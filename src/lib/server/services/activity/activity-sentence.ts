import { STATUS_LABELS, VERDICT_STATUSES } from '../../../ledger/claim';
import { COMPARED, COMPARED_WORDS } from '../../../ledger/comparison';
import { listed } from '../../../ledger/listed';
import { NOTICE_KINDS, NOTICE_LABELS } from '../../../ledger/notices';
import { ROLES, roleWithArticle } from '../../../ledger/roles';
import type { ActivityKind } from '../../../schemas/talk-views';
import { changedClaimFields } from './claim-fields';
import { textOf, valueOf, type Recorded } from './recorded';

/** What a sentence is made of: an audit row, and the words for what it names. */
export interface SentenceFacts {
	readonly before: Recorded;
	readonly after: Recorded;
	/** `claim 12`; `a claim` where it is not known which. */
	readonly claim: string;
	/** `task 4 on claim 12`. */
	readonly task: string;
	/** What a comment is on: `claim 12`, `task 4 on claim 12`, `CHSH`. */
	readonly subject: string;
	/** The person it happened to. */
	readonly person: string;
	/** The name, number or title of what has this id. */
	named(id: unknown): string | null;
}

/** What somebody did, without who. */
type Did = (facts: SentenceFacts) => string;

interface Sentence {
	readonly kind: ActivityKind;
	readonly did: Did;
	/** The whole sentence where the product itself did it; else it is named as who did. */
	readonly happened?: Did;
}

const claims = (did: Did, happened?: Did): Sentence => ({ kind: 'claims', did, happened });
const tasks = (did: Did, happened?: Did): Sentence => ({ kind: 'tasks', did, happened });
const talk = (did: Did, happened?: Did): Sentence => ({ kind: 'talk', did, happened });
const people = (did: Did, happened?: Did): Sentence => ({ kind: 'people', did, happened });
const settings = (did: Did): Sentence => ({ kind: 'settings', did });

/** One for every action that any verb records. */
export const SENTENCES: Readonly<Record<string, Sentence>> = {
	'claim.entered': claims(({ claim }) => `entered ${claim}`),
	'claim.edited': claims(({ claim, before, after }) => edited(claim, before, after)),
	'claim.withdrawn': claims(({ claim }) => `withdrew ${claim}`),
	'claim.restored': claims(({ claim }) => `restored ${claim}`),
	'claim.superseded': claims(({ claim, after, named }) => {
		const by = named(valueOf(after, 'supersededById'));
		return `marked ${claim} as superseded${by ? ` by ${by}` : ''}`;
	}),
	'claim.proposed': claims(({ claim }) => `proposed ${claim} for publication`),
	'claim.published': claims(({ claim }) => `published ${claim}`),
	'claim.unpublished': claims(({ claim, before }) =>
		textOf(before, 'visibility') === 'proposed'
			? `took back the proposal to publish ${claim}`
			: `took ${claim} back from the public`
	),
	'claim.recompute-asked': claims(({ claim }) => `asked to recompute ${claim}`),
	'claim.judged': claims(
		({ claim, after }) => `changed the verdict on ${claim} to ${statusOf(after)}`,
		({ claim, before, after }) =>
			`The verdict on ${claim} went from ${statusOf(before)} to ${statusOf(after)}`
	),
	'claim.transcription-confirmed': claims(
		({ claim }) => `compared ${claim} with its paper: all as printed`
	),
	'claim.transcription-disputed': claims(
		({ claim, after }) => `compared ${claim} with its paper: ${disputed(after)} not as printed`
	),
	'claim.transcription-voided': claims(
		({ claim }) => `set aside the comparison of ${claim} with its paper`
	),
	'claim.certificate-attached': claims(
		({ claim, after }) =>
			`attached a certificate to ${claim}: ${textOf(after, 'label') ?? 'checked'}`
	),
	'claim.notice-attached': claims(({ claim, after }) => `attached ${notice(after)} to ${claim}`),
	'claim.notice-removed': claims(({ claim, before }) => `removed ${notice(before)} from ${claim}`),
	'recomputation.cancelled': claims(({ claim }) => `stopped a recomputation of ${claim}`),

	'task.opened': tasks(({ task, after, named }) => {
		const to = named(valueOf(after, 'assigneeId'));
		return `opened ${task}${to ? ` for ${to}` : ''}`;
	}),
	'task.edited': tasks(({ task, before, after, named }) => {
		const [was, is] = [valueOf(before, 'assigneeId'), valueOf(after, 'assigneeId')];
		if (was === is) return `changed what ${task} asks`;
		const to = named(is);
		return to ? `assigned ${task} to ${to}` : `opened ${task} to all`;
	}),
	'task.taken': tasks(({ task }) => `took ${task}`),
	'task.started': tasks(({ task }) => `began ${task}`),
	'task.released': tasks(
		({ task }) => `gave back ${task}, which is open to all again`,
		({ task }) => `${capital(task)} is open to all again`
	),
	'task.submitted': tasks(({ task, after }) => {
		const what = SUBMITTED[textOf(after, 'submission')] ?? 'an answer';
		return `submitted ${what} for ${task}`;
	}),
	'task.accepted': tasks(({ task }) => `accepted the submission for ${task}`),
	'task.returned': tasks(({ task }) => `returned the submission for ${task}`),
	'task.reopened': tasks(
		({ task }) => `reopened ${task}, whose submission a certificate excludes`,
		({ task }) => `A certificate excludes what was found for ${task}, which is open again`
	),
	'task.cancelled': tasks(
		({ task }) => `cancelled ${task}`,
		({ task }) => `${capital(task)} is cancelled`
	),
	'submission.files-added': tasks(({ task, after }) => {
		const files = valueOf(after, 'files');
		const many = Array.isArray(files) ? files.length : 0;
		return `attached ${many === 1 ? 'a file' : `${many} files`} to a submission for ${task}`;
	}),

	'comment.added': talk(({ subject }) => `commented on ${subject}`),
	'comment.edited': talk(({ subject }) => `changed a comment on ${subject}`),
	'comment.removed': talk(({ subject }) => `removed a comment on ${subject}`),
	'author-message.received': talk(
		({ claim }) => `answered ${claim} as its author`,
		({ claim }) => `Somebody answered ${claim} as an author of its paper`
	),
	'author-message.handled': talk(
		({ claim }) => `marked an author’s answer on ${claim} as dealt with`
	),
	'author-message.reopened': talk(({ claim }) => `took up an author’s answer on ${claim} again`),

	'member.joined': people(({ after }) => `joined as ${role(after)}`),
	'member.left': people(() => 'left the group'),
	'member.removed': people(({ person }) => `removed ${person} from the group`),
	'member.role-changed': people(
		({ person, before, after }) => `changed ${person} from ${role(before)} to ${role(after)}`
	),
	'group.ownership-transferred': people(({ person }) => `made ${person} the owner of the group`),
	'invitation.created': people(({ after }) => `made a joining link for ${role(after, 'somebody')}`),
	'invitation.mailed': people(({ after }) => `invited somebody by mail as ${role(after)}`),
	'invitation.resent': people(({ after }) => `sent the invitation of ${role(after)} once more`),
	'invitation.revoked': people(
		() => 'revoked an invitation',
		() => 'An invitation is revoked'
	),

	'group.started': settings(() => 'started the group'),
	'group.settings-changed': settings(
		({ before, after }) => `changed the group’s ${settingWords(before, after)}`
	),

	// A person's own, which belong to no group.
	'calendar.created': settings(() => 'made a calendar address'),
	'calendar.revoked': settings(() => 'revoked a calendar address'),
	'mail.retried': settings(() => 'let a mail be sent again'),
	'mail.discarded': settings(() => 'discarded a mail'),
	'user.signed-up': people(() => 'made an account'),
	'user.password-changed': settings(() => 'changed the password'),
	'user.notifications-chosen': settings(() => 'chose what to be told of'),
	'user.made-administrator': people(({ person }) => `made ${person} an administrator of the site`),
	'user.no-longer-administrator': people(
		({ person }) => `took ${person} from the administrators of the site`
	)
};

/** The actions of a kind, for a query. */
export function actionsOf(kind: ActivityKind): string[] {
	return Object.keys(SENTENCES).filter((action) => SENTENCES[action]?.kind === kind);
}

/** The product where it is told as who did something. */
const PRODUCT = 'Merestone';

/**
 * What an audit row says: without its subject where somebody did it, as a whole sentence where
 * nobody in particular did.
 */
export function activitySentence(
	action: string,
	who: string | null,
	facts: SentenceFacts
): { readonly kind: ActivityKind; readonly text: string } {
	const { kind, did, happened } = SENTENCES[action] ?? settings(() => `recorded ${action}`);
	if (who !== null) return { kind, text: did(facts) };
	return { kind, text: happened ? happened(facts) : `${PRODUCT} ${did(facts)}` };
}

const SUBMITTED: Readonly<Record<string, string>> = {
	value: 'a value',
	certificate: 'a certificate',
	transcription: 'a comparison with the paper',
	statement: 'what was found'
};

function edited(claim: string, before: Recorded, after: Recorded): string {
	const changed = changedClaimFields(before, after);
	const [only] = changed;
	if (!only) return `edited ${claim}`;
	const words = listed(changed.map(({ word }) => word.toLowerCase()));
	const shown = changed.length === 1 && only.short ? ` from ${only.was} to ${only.is}` : '';
	return `changed the ${words} of ${claim}${shown}`;
}

function disputed(after: Recorded): string {
	const wrong = COMPARED.filter((part) => valueOf(after, part) === false);
	return listed(wrong.map((part) => COMPARED_WORDS[part])) || 'something';
}

function notice(recorded: Recorded): string {
	const kind = NOTICE_KINDS.find((known) => known === textOf(recorded, 'kind'));
	if (!kind) return 'a notice';
	return `${kind === 'erratum' ? 'an' : 'a'} ${NOTICE_LABELS[kind].toLowerCase()}`;
}

const SETTINGS: Readonly<Record<string, string>> = {
	name: 'name',
	description: 'description',
	budgetSeconds: 'time for a recomputation',
	slug: 'address'
};

function settingWords(before: Recorded, after: Recorded): string {
	const changed = Object.entries(SETTINGS).flatMap(([key, word]) =>
		valueOf(before, key) === valueOf(after, key) ? [] : [word]
	);
	return changed.length > 0 ? listed(changed) : 'settings';
}

function statusOf(recorded: Recorded): string {
	const status = VERDICT_STATUSES.find((known) => known === textOf(recorded, 'status'));
	return status ? STATUS_LABELS[status] : 'another one';
}

/** `a member`, `an owner`. */
function role(recorded: Recorded, instead = 'a member'): string {
	const name = ROLES.find((known) => known === textOf(recorded, 'role'));
	return name ? roleWithArticle(name) : instead;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
