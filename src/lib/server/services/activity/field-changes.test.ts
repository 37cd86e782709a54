import { describe, expect, it } from 'vitest';
import { fieldChanges } from './field-changes';

const ID = '01890000-0000-7000-8000-000000000001';
const LOST = '01890000-0000-7000-8000-000000000002';
const changes = (before: object, after: object) =>
	fieldChanges({ ...before }, { ...after }, (id) => (id === ID ? 'Wren Aldous' : null)).map(
		({ field, before: was, after: is }) => `${field}: ${was} -> ${is}`
	);

describe('fieldChanges', () => {
	it.each([
		[
			'what differs',
			{ printed: '2.83', note: 'x' },
			{ printed: '2.8284', note: 'x' },
			['Value: 2.83 -> 2.8284']
		],
		['all of what is new', {}, { role: 'member', note: '' }, ['Role:  -> member']],
		[
			'all of what is gone',
			{ body: 'said' },
			{ subject: 'claim', subjectId: ID },
			['Text: said -> ']
		],
		['names for ids', { assigneeId: null }, { assigneeId: ID }, ['Assignee:  -> Wren Aldous']],
		['no id that names nothing', {}, { submissionId: LOST, relation: '=' }, ['Relation:  -> =']],
		[
			'what a change set, beside what it kept',
			{ state: 'active' },
			{ state: 'withdrawn', publishedBy: null },
			['State: active -> withdrawn']
		],
		[
			'no field that the change left alone',
			{ state: 'a', visibility: 'group' },
			{ state: 'b' },
			['State: a -> b']
		],
		[
			'yes and no',
			{},
			{ valueMatches: true, locatorMatches: false },
			['Value as printed:  -> yes', 'Locator as printed:  -> no']
		],
		[
			'files by name and size',
			{},
			{ files: [{ id: LOST, name: 'log.txt', bytes: 12 }] },
			['Files:  -> Name: log.txt, Bytes: 12']
		]
	] as const)('says %s', (_, before, after, expected) => {
		expect(changes(before, after)).toEqual(expected);
	});

	it('cuts what is too long for a list', () => {
		const [change] = fieldChanges({}, { instructions: 'a'.repeat(5_000) }, () => null);
		expect(change?.after.length).toBeLessThan(700);
		expect(change?.after.endsWith(' …')).toBe(true);
	});
});
