import { describe, expect, it } from 'vitest';
import type { NotificationKind } from '../../../ledger/notifications';
import type { NotificationFacts } from '../../services/notifications/notification-facts';
import { digestMail, MOST_IN_DIGEST } from './digest-mail';

process.env.MERESTONE_SECRET ??= 'a secret of the tests, of no use elsewhere';

function facts(kind: NotificationKind, group: string, minute: number): NotificationFacts {
	return {
		id: `${group}-${kind}-${minute}`,
		kind,
		at: new Date(Date.UTC(2026, 11, 1, 12, minute)),
		unread: true,
		text: '',
		recipient: { id: 'u', name: 'Mo Member', address: 'mo.member@reading.example' },
		role: 'member',
		delivery: 'daily',
		group: { id: group, name: `Group ${group}`, slug: group },
		actor: `Person ${minute}`,
		claim: null,
		task: null,
		comment: null,
		message: null
	};
}

describe('a digest', () => {
	it('stands group by group, kind by kind, newest first', () => {
		const mail = digestMail(
			[
				facts('comment', 'b', 9),
				facts('claim-proposed', 'a', 8),
				facts('comment', 'b', 7),
				facts('mention', 'b', 6)
			],
			'https://merestone.example'
		);
		expect(mail?.subject).toBe('4 things are new in 2 groups');
		expect(
			mail?.sections?.map(({ title, parts }) => [
				title,
				parts.map((part) => [part.title, part.items.map(({ text }) => text)])
			])
		).toEqual([
			[
				'Group b',
				[
					['Mentions', ['Person 6 mentions you in a comment on a claim.']],
					['Comments', ['Person 9 commented on a claim.', 'Person 7 commented on a claim.']]
				]
			],
			['Group a', [['Proposed for publication', ['Person 8 proposes a claim for publication.']]]]
		]);
	});

	it('stays readable: the rest is counted', () => {
		const many = Array.from({ length: MOST_IN_DIGEST + 5 }, (_, i) => facts('comment', 'a', i));
		const mail = digestMail(many, 'https://merestone.example');
		expect(mail?.sections?.[0]?.parts[0]?.items).toHaveLength(MOST_IN_DIGEST);
		expect(mail?.paragraphs[0]).toContain('and 5 more');
	});

	it('of nothing is none', () => {
		expect(digestMail([], 'https://merestone.example')).toBeNull();
	});
});
