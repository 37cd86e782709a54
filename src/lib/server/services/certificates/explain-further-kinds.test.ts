import { describe, expect, it } from 'vitest';
import { explainExactMoments } from './explain-exact-moments';
import { explainFacet, explainHybrid, explainLocalMixture } from './explain-polytope';

describe('kinds in words', () => {
	it('say of a facet what the test found', () => {
		const facet = { kind: 'facet', strategies: [[], [], []], vanishing: null } as const;
		expect(explainFacet(facet).claims).toContain('is a facet');
		expect(explainFacet({ ...facet, vanishing: [[]] }).claims).toContain('no facet');
		expect(explainFacet(facet).fields[1]?.size).toBe('3 strategies');
	});

	it('name the groups of a hybrid maximum by their letters', () => {
		const groups = [[0, 2], [1]];
		const explained = explainHybrid({ kind: 'hybrid', groups, behaviours: [], bipartitions: [] });
		expect(explained.fields[0]?.size).toBe('AC | B');
	});

	it('count what a mixture and an exact multiplier hold', () => {
		const mixture = { kind: 'local-mixture', mixture: [1], multipliers: [1, 2] } as const;
		expect(explainLocalMixture(mixture).fields.map(({ size }) => size)).toEqual([
			'1 strategy',
			'2 numbers',
			'one number'
		]);
		const exact = explainExactMoments({
			kind: 'npa-exact',
			monomials: [1, 2, 3],
			denominator: '1024',
			rowMultipliers: {},
			constraintMultipliers: [],
			moments: null
		});
		const named = exact.fields.map(({ name }) => name);
		expect(named).toEqual(expect.arrayContaining(['denominator', 'multiplier', 'shift', 'bound']));
		expect(exact.fields.find(({ name }) => name === 'multiplier')?.size).toContain('6 numbers');
	});
});
