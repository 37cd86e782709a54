import type { ClaimView } from '../../src/lib/schemas/views';
import { groupOfFour, type GroupOfFour } from './people';
import type { TestServer } from './server';
import { bibtexOf, claimFields } from './service';
import type { Visitor } from './visitor';
import { lookUp } from './whole-database';

/** A group with one of everything that an attacker may want to reach by its id. */
export interface HostileWorld extends GroupOfFour {
	/** A published discrepancy, confirmed by its owner. */
	readonly claim: number;
	readonly claimId: string;
	/** Submitted by the member, with a file; waits. */
	readonly task: number;
	readonly ids: Readonly<
		Record<
			| 'submission'
			| 'file'
			| 'comment'
			| 'notice'
			| 'message'
			| 'invitation'
			| 'notification'
			| 'feed'
			| 'member'
			| 'owner'
			| 'inequality'
			| 'reference',
			string
		>
	>;
	/** Path of the group's calendar, as the member has it. */
	readonly calendar: string;
	id(sql: string): Promise<string>;
}

const must = async (response: Response, status: number, what: string): Promise<Response> => {
	if (response.status === status) return response;
	throw new Error(`${what}: ${response.status} ${(await response.text()).slice(0, 2_000)}`);
};

/** A form with files, as a browser sends it. */
export async function handIn(
	who: Visitor,
	task: string,
	fields: Readonly<Record<string, string>>,
	files: readonly (readonly [name: string, content: string | Uint8Array<ArrayBuffer>])[] = []
): Promise<Response> {
	const form = new FormData();
	for (const [name, value] of Object.entries(fields)) form.append(name, value);
	for (const [name, content] of files) form.append('files', new File([content], name));
	return who.request(`${task}?/submit`, { method: 'POST', body: form });
}

export const CONFIRMED = { valueMatches: 'yes', locatorMatches: 'yes', inequalityMatches: 'yes' };

/** Enters CHSH's quantum maximum with two digits swapped (2 sqrt 2 = 2.8284, Tsirelson 1980). */
export async function enterDiscrepancy(
	who: Visitor,
	slug: string,
	paper: number,
	more: Readonly<Record<string, string>> = {}
): Promise<ClaimView> {
	const api = `/api/v1/groups/${slug}/claims`;
	const fields = claimFields({ printed: '2.8248', bibtex: bibtexOf(paper), ...more });
	const entered = await must(await who.sendJson('POST', api, fields), 201, 'entering');
	const { number } = (await entered.json()) as { number: number };
	await (await who.get(`${api}/${number}/events`)).text();
	return (await (await who.get(`${api}/${number}`)).json()) as ClaimView;
}

export async function hostileWorld(server: TestServer, name: string): Promise<HostileWorld> {
	const group = await groupOfFour(server, name);
	const { slug, member, maintainer, owner, anonymous } = group;
	const view = await enterDiscrepancy(member, slug, 901);
	const page = `/g/${slug}/claims/${view.number}`;
	await must(
		await owner.submit(`${page}?/confirm`, { ...CONFIRMED, version: '1' }),
		200,
		'confirm'
	);
	await must(await maintainer.submit(`${page}?/publish`), 200, 'publish');
	await must(
		await anonymous.submit(`/claims/${view.id}/answer`, {
			name: 'Ilse Corvin',
			email: 'ilse@institute.example',
			message: 'Two digits are swapped.'
		}),
		303,
		'an author'
	);
	const notice = { kind: 'erratum', bibtex: bibtexOf(902) };
	await must(await member.submit(`${page}?/attachNotice`, notice), 200, 'a notice');
	await must(await member.submit(`${page}?/comment`, { body: 'Said among us.' }), 303, 'a comment');
	const opened = await must(
		await maintainer.submit(`/g/${slug}/tasks/new?/open`, {
			claims: String(view.number),
			kind: 'recompute',
			instructions: 'With a program of your own.'
		}),
		303,
		'a task'
	);
	const path = opened.headers.get('location') ?? '';
	await must(await member.submit(`${path}?/take`), 200, 'taking');
	const found = { kind: 'value', printed: '2.8284', program: 'own program', programVersion: '2' };
	await must(await handIn(member, path, found, [['run.log', 'ok']]), 200, 'submitting');
	const mailed = { emails: 'somebody@elsewhere.example', role: 'member' };
	await must(await owner.submit(`/g/${slug}/members?/mail`, mailed), 200, 'inviting');
	await must(await member.submit('/home/tasks?/makeCalendar', { group: slug }), 303, 'a calendar');
	await atRest(server);
	const tasksPage = await (await member.get(`/g/${slug}/tasks`)).text();
	const id = (sql: string) => lookUp(server.databaseUrl, sql);
	const groupId = await id(`SELECT id FROM groups WHERE slug = '${slug}'`);
	const newest = (table: string, where = '1') =>
		id(`SELECT id FROM ${table} WHERE ${where} ORDER BY id DESC LIMIT 1`);
	const ofGroup = `group_id = '${groupId}'`;
	const withRole = (role: string) =>
		id(`SELECT user_id FROM memberships WHERE ${ofGroup} AND role = '${role}'`);
	return {
		...group,
		claim: view.number,
		claimId: view.id,
		task: Number(/\d+$/.exec(path)?.[0]),
		ids: {
			submission: await newest('submissions', `claim_id = '${view.id}'`),
			file: await newest('evidence_files', ofGroup),
			comment: await newest('comments', ofGroup),
			notice: await newest('claim_notices', `claim_id = '${view.id}'`),
			message: await newest('author_messages', `claim_id = '${view.id}'`),
			invitation: await newest('invitations', `${ofGroup} AND email IS NOT NULL`),
			notification: await newest('notifications', ofGroup),
			feed: await newest('calendar_feeds', ofGroup),
			member: await withRole('member'),
			owner: await withRole('owner'),
			inequality: view.subject.inequalityId ?? '',
			reference: view.reference.id
		},
		calendar: /\/calendar\/[\w.-]+\.ics/.exec(tasksPage)?.[0] ?? '',
		id
	};
}

const REST_LIMIT_MS = 90_000;

/** Until nothing is queued, running or to be mailed, so that only requests change the database. */
export async function atRest(server: TestServer): Promise<void> {
	const busy = `SELECT (SELECT count(*) FROM recomputations WHERE state IN ('queued', 'running'))
		+ (SELECT count(*) FROM outbox WHERE state = 'waiting')`;
	const start = Date.now();
	while ((await lookUp(server.databaseUrl, busy)) !== '0') {
		if (Date.now() - start > REST_LIMIT_MS) throw new Error('The server is still at work.');
		await new Promise((resolve) => setTimeout(resolve, 200));
	}
}
