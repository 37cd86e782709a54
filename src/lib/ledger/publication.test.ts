import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CLAIM_STATES, VERDICT_STATUSES, VISIBILITIES } from './claim';
import { isConfirmed, isPublic, whyNotPublishable, type PublicationFacts } from './publication';

const facts = (over: Partial<PublicationFacts> = {}): PublicationFacts => ({
	state: 'active',
	visibility: 'public',
	status: 'discrepancy',
	version: 2,
	confirmedVersion: 2,
	...over
});

describe('publishing', () => {
	it.each([
		['a discrepancy nobody compared', { confirmedVersion: null }, /has not happened yet/],
		['one that was edited since', { confirmedVersion: 1 }, /compared again/],
		['a withdrawn claim', { state: 'withdrawn', status: 'agreement' }, /withdrawn/]
	] as const)('is refused for %s, with the reason', (_, over, reason) => {
		expect(whyNotPublishable(facts(over))).toMatch(reason);
	});

	it.each([
		['a discrepancy that is confirmed', {}],
		['an agreement, confirmed or not', { status: 'agreement', confirmedVersion: null }],
		['what is open', { status: 'open', confirmedVersion: null }],
		['what is superseded', { state: 'superseded' }]
	] as const)('is possible for %s', (_, over) => {
		expect(whyNotPublishable(facts(over))).toBeNull();
	});

	it('and being seen follow one rule', () => {
		fc.assert(
			fc.property(
				fc.record({
					state: fc.constantFrom(...CLAIM_STATES),
					visibility: fc.constantFrom(...VISIBILITIES),
					status: fc.constantFrom(...VERDICT_STATUSES),
					version: fc.integer({ min: 1, max: 3 }),
					confirmedVersion: fc.option(fc.integer({ min: 1, max: 3 }))
				}),
				(claim) => {
					const may = whyNotPublishable(claim) === null;
					expect(isPublic(claim)).toBe(may && claim.visibility === 'public');
					if (isPublic(claim) && claim.status === 'discrepancy')
						expect(isConfirmed(claim)).toBe(true);
				}
			)
		);
	});
});
