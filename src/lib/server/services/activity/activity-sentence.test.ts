import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { ACTIVITY_KINDS } from '../../../schemas/talk-views';
import { actionsOf, activitySentence, SENTENCES, type SentenceFacts } from './activity-sentence';

const FOLDER = join('src', 'lib', 'server');
const sources = readdirSync(FOLDER, { recursive: true, encoding: 'utf8' })
	.filter((file) => file.endsWith('.ts') && !file.endsWith('.test.ts'))
	.map((file) => ({ file, text: readFileSync(join(FOLDER, file), 'utf8') }));

/** Whatever stands behind `action:` or `audit:` and looks like an action: `claim.entered`. */
const recorded = sources.flatMap(({ file, text }) =>
	[...text.matchAll(/\b(?:action|audit):\s*([^,}]+)/g)].flatMap(([, value = '']) =>
		[...value.matchAll(/'([a-z-]+\.[a-z-]+)'/g)].map(([, action = '']) => ({ file, action }))
	)
);

const ID = '01890000-0000-7000-8000-000000000001';
const facts = (over: Partial<SentenceFacts> = {}): SentenceFacts => ({
	before: {},
	after: {},
	claim: 'claim 12',
	task: 'task 4 on claim 12',
	subject: 'claim 12',
	person: 'Ines Calder',
	named: (id) => (id === ID ? 'Wren Aldous' : null),
	...over
});
const told = (action: string, over: Partial<SentenceFacts> = {}, who: string | null = 'Ines') =>
	activitySentence(action, who, facts(over)).text;

describe('every action that is recorded', () => {
	it('has a sentence', () => {
		expect(recorded.length).toBeGreaterThan(30);
		expect(recorded.filter(({ action }) => !(action in SENTENCES))).toEqual([]);
	});

	it('is recorded somewhere, where it has a sentence', () => {
		const actions = recorded.map(({ action }) => action);
		expect(Object.keys(SENTENCES).filter((action) => !actions.includes(action))).toEqual([]);
	});

	it('has one that reads as one, whoever did it and however little is known', () => {
		for (const action of Object.keys(SENTENCES)) {
			expect(told(action), action).toMatch(/^[a-z][^]*[^.:,]$/);
			expect(told(action, {}, null), action).toMatch(/^[A-Z][^]*[^.:,]$/);
			expect(told(action) + told(action, {}, null), action).not.toMatch(/undefined|null|\s\s|of $/);
		}
	});

	it('is of one kind, so that the kinds together are all', () => {
		const all = ACTIVITY_KINDS.flatMap(actionsOf);
		expect(all.sort()).toEqual(Object.keys(SENTENCES).sort());
	});
});

describe('a verb that writes', () => {
	/** Write without a row of their own, each with its reason. */
	const WITHOUT: Readonly<Record<string, string>> = {
		'services/inequalities/ensure-catalogue.ts': 'the families that the product ships, at start',
		'services/inequalities/upgrade-digests.ts': 'the same facts under a better digest, at start',
		'services/notifications/mark-read.ts': 'what somebody has read is nobody else’s to know',
		'services/notifications/queue-digests.ts': 'mails of what is recorded already',
		'services/notifications/send-due-reminders.ts': 'mails that a date calls for',
		'services/recomputations/renew-stations.ts': 'runs that a newer solver does over, at start',
		'services/users/sign-in.ts': 'a newer hash of the same password; the security log has it'
	};
	/** The verbs' own ways to `recordAudit`. */
	const AUDITED =
		/\b(recordAudit|changeClaim|changeTask|stepTask|dropInvitations|storeChoices|recordTranscriptionCheck)\(/;

	it('records it', () => {
		const silent = sources
			.filter(({ file }) => file.startsWith('services'))
			.filter(({ text }) => /\.write\(/.test(text) && !AUDITED.test(text))
			.map(({ file }) => file);
		expect(silent).toEqual(Object.keys(WITHOUT));
	});
});

describe('a sentence', () => {
	it.each([
		[
			'claim.edited',
			{ before: { printed: '2.83' }, after: { printed: '2.8284' } },
			'changed the value of claim 12 from 2.83 to 2.8284'
		],
		[
			'claim.edited',
			{ before: { printed: '2', note: '' }, after: { printed: '3', note: 'x' } },
			'changed the value and note of claim 12'
		],
		[
			'claim.edited',
			{ before: { referenceId: ID }, after: { referenceId: 'other' } },
			'changed the paper of claim 12'
		],
		[
			'claim.superseded',
			{ after: { supersededById: ID } },
			'marked claim 12 as superseded by Wren Aldous'
		],
		[
			'claim.unpublished',
			{ before: { visibility: 'proposed' } },
			'took back the proposal to publish claim 12'
		],
		[
			'claim.transcription-disputed',
			{ after: { valueMatches: false, locatorMatches: false, inequalityMatches: true } },
			'compared claim 12 with its paper: value and locator not as printed'
		],
		['claim.notice-attached', { after: { kind: 'erratum' } }, 'attached an erratum to claim 12'],
		['task.opened', { after: { assigneeId: ID } }, 'opened task 4 on claim 12 for Wren Aldous'],
		[
			'task.submitted',
			{ after: { submission: 'value' } },
			'submitted a value for task 4 on claim 12'
		],
		['comment.added', { subject: 'CHSH' }, 'commented on CHSH'],
		[
			'member.role-changed',
			{ before: { role: 'member' }, after: { role: 'owner' } },
			'changed Ines Calder from a member to an owner'
		],
		[
			'group.settings-changed',
			{ before: { name: 'a' }, after: { name: 'b' } },
			'changed the group’s name'
		]
	] as const)('on %s says what happened: %j', (action, over, text) => {
		expect(told(action, over)).toBe(text);
	});

	it('is whole where nobody in particular did it', () => {
		const verdict = { before: { status: 'open' }, after: { status: 'discrepancy' } };
		expect(told('claim.judged', verdict, null)).toBe(
			'The verdict on claim 12 went from Open to Discrepancy'
		);
		expect(told('task.opened', {}, null)).toBe('Merestone opened task 4 on claim 12');
	});
});
