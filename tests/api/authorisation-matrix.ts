import { ROLES, type Role } from '../../src/lib/ledger/roles';
import type { MatrixWorld } from '../support/matrix-world';

export const EVERYONE = ['anonymous', 'outsider', ...ROLES] as const;
export type Who = (typeof EVERYONE)[number];

type Answers = Readonly<Record<Who, number>>;

export interface MatrixRow {
	/** The route's folder below src/routes without groups: `/g/[slug]/members`. */
	readonly route: string;
	/** `GET`, another method of an endpoint, or the name of a page's action. */
	readonly door: string;
	readonly path: (world: MatrixWorld) => string;
	readonly fields?: Readonly<Record<string, string>>;
	readonly json?: (world: MatrixWorld) => unknown;
	readonly answers: Answers;
}

const at = (path: string) => (world: MatrixWorld) =>
	path.replace('[slug]', world.slug).replace('[number]', String(world.number));

/** From a role on `ok`; a visitor gets `signIn`, members of other groups 404, lower roles 403. */
function members(from: Role, ok: number, signIn: number): Answers {
	const needed = ROLES.indexOf(from);
	const roles = ROLES.map((role, i) => [role, i >= needed ? ok : 403] as const);
	return { anonymous: signIn, outsider: 404, ...Object.fromEntries(roles) } as Answers;
}

const same = (status: number): Answers => ({
	anonymous: status,
	outsider: status,
	observer: status,
	member: status,
	maintainer: status,
	owner: status
});

const page = (from: Role, ok = 200) => members(from, ok, 303);
const action = (from: Role, ok = 200) => members(from, ok, 401);
const signedIn = (visitor: number, ok: number): Answers => ({ ...same(ok), anonymous: visitor });

const claim = '/g/[slug]/claims/[number]';
const apiGroup = '/api/v1/groups/[slug]/claims';
const apiClaim = `${apiGroup}/[number]`;
const run = '/api/v1/recomputations/[id]';

const task = '/g/[slug]/tasks/[number]';
const taskPage = (w: MatrixWorld) => `/g/${w.slug}/tasks/${w.taskNumber}`;
const NO_COMMENT = { id: 'none', body: 'Said otherwise.' };
const inequalityPage = (w: MatrixWorld) => `/g/${w.slug}/inequalities/${w.inequalityId}`;

function doors(
	route: string,
	entries: Readonly<Record<string, Answers>>,
	more: Partial<MatrixRow> = {}
): MatrixRow[] {
	return Object.entries(entries).map(([door, answers]) => ({
		route,
		door,
		path: at(route),
		answers,
		...more
	}));
}

/** A new page, action or endpoint needs its row here; authorisation.test.ts fails without. */
export const MATRIX: readonly MatrixRow[] = [
	// For everyone.
	...doors('/', { GET: same(200) }),
	...doors('/method', { GET: same(200) }),
	...doors('/demo/mail', { GET: same(404) }),
	...doors('/claims/[id]', { GET: same(200) }, { path: (w) => `/claims/${w.publicClaimId}` }),
	...doors('/claims/[id]', { GET: same(404) }, { path: (w) => `/claims/${w.claimId}` }),
	...doors(
		'/claims/[id]/answer',
		{ GET: same(200), default: same(400) },
		{ path: (w) => `/claims/${w.publicClaimId}/answer` }
	),
	...doors(
		'/claims/[id]/answer',
		{ GET: same(404) },
		{ path: (w) => `/claims/${w.claimId}/answer` }
	),
	...doors(
		'/claims/[id]/answer',
		{ default: same(404) },
		{
			path: (w) => `/claims/${w.claimId}/answer`,
			fields: { name: 'Mira Arden', email: 'mira@institute.example', message: 'A misprint.' }
		}
	),
	...doors(
		'/inequalities/[id]',
		{ GET: same(200) },
		{ path: (w) => `/inequalities/${w.publicInequalityId}` }
	),
	...doors(
		'/inequalities/[id]',
		{ GET: same(404) },
		{ path: (w) => `/inequalities/${w.inequalityId}` }
	),
	...doors(
		'/recomputations/[id]',
		{ GET: { ...same(200), anonymous: 404, outsider: 404 } },
		{ path: (w) => `/recomputations/${w.recomputationId}` }
	),
	...doors(
		'/references/[id]',
		{ GET: same(200) },
		{ path: (w) => `/references/${w.publicReferenceId}` }
	),
	...doors('/references/[id]', { GET: same(404) }, { path: (w) => `/references/${w.referenceId}` }),

	// What a standing address shows is in calendar.test.ts.
	...doors(
		'/calendar/[token].ics',
		{ GET: same(404) },
		{ path: () => '/calendar/none-of-anyone.ics' }
	),

	// Accounts.
	...doors('/sign-in', { GET: signedIn(200, 303), default: signedIn(400, 303) }),
	...doors('/sign-up', { GET: signedIn(200, 303), default: signedIn(400, 303) }),
	...doors('/account', {
		GET: signedIn(303, 200),
		password: signedIn(401, 400),
		end: signedIn(401, 404),
		endOthers: signedIn(401, 200)
	}),
	...doors('/account/notifications', { GET: signedIn(303, 200), save: signedIn(401, 200) }),
	...doors('/news', {
		GET: signedIn(303, 200),
		open: signedIn(401, 404),
		read: signedIn(401, 200),
		all: signedIn(401, 200)
	}),
	// A link of a mail, for whoever holds it; notifications.test.ts has real ones.
	...doors(
		'/unsubscribe/[token]',
		{ GET: same(404), default: same(404) },
		{ path: () => '/unsubscribe/nobody.comment.none' }
	),
	// Only the site's administrator, who is none of these.
	...doors('/admin/mail', {
		GET: signedIn(303, 404),
		retry: signedIn(401, 404),
		retryDead: signedIn(401, 404),
		discard: signedIn(401, 404)
	}),
	...doors('/home', { GET: signedIn(303, 200) }),
	...doors('/home/tasks', {
		GET: signedIn(303, 200),
		makeCalendar: signedIn(401, 303),
		revokeCalendar: signedIn(401, 404)
	}),
	...doors(
		'/home/tasks',
		{ makeCalendar: { ...signedIn(401, 303), outsider: 404 } },
		{ fields: { group: 'quarry-row' } }
	),
	...doors('/groups/new', { GET: signedIn(303, 200), default: signedIn(401, 400) }),
	...doors('/join/[token]', { GET: same(200) }, { path: (w) => w.link }),
	// Joining itself is in groups.test.ts; here it would make a member of the outsider.
	...doors('/join/[token]', { default: signedIn(401, 404) }, { path: () => '/join/unknown' }),

	// A group.
	...doors('/g/[slug]', { GET: page('observer') }),
	...doors('/g/[slug]/members', { GET: page('observer') }),
	...doors('/g/[slug]/members', { invite: action('maintainer') }, { fields: { role: 'observer' } }),
	...doors('/g/[slug]/members', { revoke: action('maintainer', 404) }, { fields: { id: 'none' } }),
	...doors('/g/[slug]/members', { mail: action('maintainer', 400) }, { fields: { emails: 'x' } }),
	...doors('/g/[slug]/members', { resend: action('maintainer', 404) }, { fields: { id: 'none' } }),
	...doors('/g/[slug]/members', { transfer: action('owner', 404) }, { fields: { user: 'nobody' } }),
	...doors('/g/[slug]/settings', { GET: page('maintainer'), save: action('maintainer', 400) }),
	...doors(
		'/g/[slug]/members',
		{ role: action('owner', 404) },
		{ fields: { user: 'nobody', role: 'member' } }
	),
	...doors(
		'/g/[slug]/members',
		{ remove: { ...action('owner', 404) } },
		{ fields: { user: 'nobody' } }
	),
	...doors('/g/[slug]/ledger.csv', { GET: page('observer') }),
	...doors('/g/[slug]/inequalities', { GET: page('observer') }),
	...doors(
		'/g/[slug]/inequalities/[id]',
		{ GET: page('observer') },
		{ path: (w) => `/g/${w.slug}/inequalities/${w.inequalityId}` }
	),
	...doors('/g/[slug]/references', { GET: page('observer') }),
	...doors(
		'/g/[slug]/references/[id]',
		{ GET: page('observer') },
		{ path: (w) => `/g/${w.slug}/references/${w.referenceId}` }
	),

	// Files handed in; those that are there are in evidence-files.test.ts.
	...doors(
		'/g/[slug]/files/[id]',
		{ GET: page('observer', 404) },
		{ path: (w) => `/g/${w.slug}/files/01890a5d-ac96-774b-bcce-b302099a8057` }
	),
	...doors(
		'/g/[slug]/submissions/[id]/certificate',
		{ GET: page('observer', 404) },
		{ path: (w) => `/g/${w.slug}/submissions/01890a5d-ac96-774b-bcce-b302099a8057/certificate` }
	),

	// A task open to all: the member takes it first, and whoever comes later finds it taken. Who
	// decides on whose submission is in tasks.test.ts.
	...doors('/g/[slug]/tasks', { GET: page('observer') }),
	...doors('/g/[slug]/tasks/new', { GET: page('maintainer'), open: action('maintainer', 400) }),
	...doors(task, { GET: page('observer') }, { path: taskPage }),
	...doors(
		task,
		{
			take: { ...action('member', 409), member: 200 },
			start: { ...action('member', 409), member: 200 },
			release: { ...action('member', 409), member: 200 },
			submit: action('member', 400),
			accept: action('maintainer', 409),
			return: action('maintainer', 409),
			cancel: action('maintainer', 400)
		},
		{ path: taskPage }
	),
	...doors(task, { edit: action('maintainer', 409) }, { path: taskPage, fields: { version: '0' } }),
	...doors(
		task,
		{ comment: action('member', 303) },
		{ path: taskPage, fields: { body: 'The authors were asked.' } }
	),
	...doors(
		task,
		{ 'edit-comment': action('member', 404), 'remove-comment': action('member', 404) },
		{ path: taskPage, fields: NO_COMMENT }
	),

	// Claims. The member entered it, so that what is one's own to do is the member's too.
	...doors('/g/[slug]/claims/new', {
		GET: page('member'),
		enter: action('member', 400),
		signIn: members('member', 400, 400)
	}),
	...doors(`${claim}/edit`, {
		GET: page('member'),
		save: action('member', 400),
		signIn: members('member', 400, 400)
	}),
	...doors(claim, {
		GET: page('observer'),
		recompute: action('member'),
		withdraw: action('member'),
		restore: action('member'),
		propose: action('member'),
		publish: action('maintainer'),
		unpublish: action('maintainer'),
		assign: action('maintainer')
	}),
	// The member entered it, so that somebody else compares it; here with questions left open.
	...doors(claim, { confirm: action('maintainer', 400) }, { fields: { version: '1' } }),
	...doors(claim, { attachNotice: action('member', 400) }, { fields: { kind: 'erratum' } }),
	...doors(claim, { removeNotice: action('member', 404) }, { fields: { id: 'none' } }),
	...doors(claim, { handleMessage: action('maintainer', 404) }, { fields: { id: 'none' } }),
	...doors(claim, { reopenMessage: action('maintainer', 404) }, { fields: { id: 'none' } }),
	...doors(claim, { supersede: action('member', 400) }, { fields: { by: '999' } }),
	...doors(claim, { cancel: action('observer', 404) }, { fields: { id: 'none' } }),
	...doors(claim, { recheck: action('observer', 404) }, { fields: { id: 'none' } }),

	// Talk; whose comment may be changed is in comments.test.ts.
	...doors(claim, { comment: action('member', 303) }, { fields: { body: 'Checked by hand.' } }),
	...doors(
		claim,
		{ 'edit-comment': action('member', 404), 'remove-comment': action('member', 404) },
		{ fields: NO_COMMENT }
	),
	...doors(
		'/g/[slug]/inequalities/[id]',
		{ comment: action('member', 303) },
		{ path: inequalityPage, fields: { body: 'A form that is easier to read.' } }
	),
	...doors(
		'/g/[slug]/inequalities/[id]',
		{ 'edit-comment': action('member', 404), 'remove-comment': action('member', 404) },
		{ path: inequalityPage, fields: NO_COMMENT }
	),
	...doors(
		'/api/v1/groups/[slug]/previews',
		{ POST: action('member') },
		{ json: () => ({ text: 'so $x$' }) }
	),
	...doors('/g/[slug]/activity', { GET: page('observer') }),
	...doors('/g/[slug]/activity.csv', { GET: page('observer') }),

	// The API.
	...doors('/api/v1/bounds', { GET: same(200) }),
	...doors(
		'/api/v1/claims/[id]',
		{ GET: same(200) },
		{ path: (w) => `/api/v1/claims/${w.publicClaimId}` }
	),
	...doors(
		'/api/v1/claims/[id]',
		{ GET: same(404) },
		{ path: (w) => `/api/v1/claims/${w.claimId}` }
	),
	...doors(
		'/api/v1/readings',
		{ POST: action('observer') },
		{ path: () => '/api/v1/readings', json: (w) => ({ group: w.slug }) }
	),
	...doors(
		'/api/v1/inequalities',
		{ GET: action('observer') },
		{ path: (w) => `/api/v1/inequalities?group=${w.slug}` }
	),
	...doors(
		'/api/v1/inequalities/[id]/sdpa',
		{ GET: same(200) },
		{ path: (w) => `/api/v1/inequalities/${w.publicInequalityId}/sdpa?level=1` }
	),
	...doors(
		'/api/v1/inequalities/[id]/sdpa',
		{ GET: { ...same(200), anonymous: 404, outsider: 404 } },
		{ path: (w) => `/api/v1/inequalities/${w.inequalityId}/sdpa?level=1` }
	),
	...doors(claim, { attach: action('member', 400) }, { fields: { certificate: 'no JSON' } }),
	...doors(
		'/g/[slug]/attachments/[id]',
		{ GET: page('observer', 404) },
		{ path: (w) => `/g/${w.slug}/attachments/none` }
	),
	...doors(apiGroup, { GET: action('observer') }),
	...doors(apiGroup, { POST: action('member', 400) }, { json: () => ({ printed: 'no number' }) }),
	...doors(apiClaim, { GET: action('observer') }),
	...doors(`${apiClaim}/tasks`, { GET: action('observer') }),
	...doors('/api/v1/groups/[slug]/activity', { GET: action('observer') }),
	...doors('/api/v1/groups/[slug]/tasks', { GET: action('observer') }),
	...doors(
		'/api/v1/groups/[slug]/tasks/[number]',
		{ GET: action('observer') },
		{ path: (w) => `/api/v1/groups/${w.slug}/tasks/${w.taskNumber}` }
	),
	...doors('/api/v1/news', { GET: signedIn(401, 200) }),
	...doors(`${apiClaim}/progress`, { GET: action('observer') }),
	...doors(`${apiClaim}/events`, { GET: action('observer') }),
	...doors(`${apiClaim}/recomputations`, { POST: action('member', 202) }),
	...['', '/result', '/check'].flatMap((part) => {
		const door = part === '/check' ? 'POST' : 'GET';
		const path = (id: string) => `/api/v1/recomputations/${id}${part}`;
		return [
			...doors(run + part, { [door]: same(200) }, { path: (w) => path(w.publicRecomputationId) }),
			...doors(
				run + part,
				{ [door]: { ...same(200), anonymous: 404, outsider: 404 } },
				{ path: (w) => path(w.recomputationId) }
			)
		];
	}),
	// Neither run is a semidefinite programme.
	...doors(
		`${run}/sdpa`,
		{ GET: same(404) },
		{ path: (w) => `/api/v1/recomputations/${w.recomputationId}/sdpa` }
	),
	...doors(
		run,
		{ DELETE: members('member', 409, 401) },
		{ path: (w) => `/api/v1/recomputations/${w.recomputationId}?group=${w.slug}` }
	)
];
