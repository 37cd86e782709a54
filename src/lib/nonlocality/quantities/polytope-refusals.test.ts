import { describe, expect, it } from 'vitest';
import { problemOn, solved } from '../../../../tests/factories/solver-problem';
import type {
	Certificate,
	FacetCertificate,
	HybridCertificate,
	LocalMixtureCertificate
} from '../certificates/types';
import { checkFacet } from '../certificates/check-facet';
import { verifyResult } from '../certificates/verify';
import type { DoneResult, Problem } from '../problem';
import { familyFunctional } from '../scenario/families';

const svetlichny = problemOn('local', familyFunctional({ name: 'svetlichny', n: 3 }));
const chsh = problemOn('local', familyFunctional({ name: 'chsh' }));
const tilted = problemOn('local', familyFunctional({ name: 'tilted-chsh', alpha: 1 }));

/** The reason for which a changed certificate, or another problem, is refused. */
function reasonOf(result: DoneResult, certificate: Certificate, problem = result.problem): string {
	const outcome = verifyResult({ ...result, certificate, problem });
	if (outcome.checked) throw new Error('it is accepted');
	return outcome.reason;
}

describe('a hybrid certificate', () => {
	const narrow: Problem = { ...svetlichny, quantity: 'hybrid', model: 'no-signalling' };
	const wide: Problem = { ...svetlichny, quantity: 'hybrid', model: 'svetlichny' };
	const hybridOf = ({ certificate }: DoneResult): HybridCertificate => {
		if (certificate?.kind !== 'hybrid') throw new Error('no hybrid certificate');
		return certificate;
	};

	it('is refused for what is no product of behaviours', async () => {
		const result = await solved(narrow);
		const whole = hybridOf(result);
		const [first = {}, second = {}] = whole.behaviours;
		const refused = (change: Partial<HybridCertificate>) =>
			reasonOf(result, { ...whole, ...change });
		expect(refused({ groups: [[1], [0, 2]] })).toMatch(/no bipartition/);
		expect(refused({ behaviours: [first] })).toMatch(/no bipartition/);
		expect(refused({ behaviours: [{ ...first, '9|9': '1' }, second] })).toMatch(
			/group 0: "9\|9" names no probability/
		);
		expect(refused({ behaviours: [{}, second] })).toMatch(/sum to 0, not 1/);
		expect(refused({ value: '5' })).toMatch(/the lower side is 4, the upper 4, not 5/);
	});

	it('is refused when a bipartition, a vertex or a multiplier is missing or wrong', async () => {
		const result = await solved(narrow);
		const whole = hybridOf(result);
		const [first, ...others] = whole.bipartitions;
		const [branch, ...branches] = first?.branches ?? [];
		if (!first || !branch) throw new Error('no branch');
		const refused = (change: object, branchChange: object | null = null) => {
			const changed = branchChange ? [{ ...branch, ...branchChange }, ...branches] : first.branches;
			const bipartition = { ...first, branches: changed, ...change };
			return reasonOf(result, { ...whole, bipartitions: [bipartition, ...others] });
		};
		expect(reasonOf(result, { ...whole, bipartitions: others })).toMatch(/is missing/);
		expect(refused({ branches })).toMatch(/a vertex of the listed group is missing/);
		expect(refused({ listed: 3 })).toMatch(/does not say whose vertices/);
		expect(refused({}, { vertex: { '5|5': '1' } })).toMatch(/names no probability/);
		expect(refused({}, { multipliers: { '5|5': '1' } })).toMatch(/multipliers: "5\|5"/);
		const [key = ''] = Object.keys(branch.multipliers);
		expect(refused({}, { multipliers: { [key]: '-1' } })).toMatch(/is negative/);
		// without multipliers the bound is a poor one, no longer the printed maximum
		expect(refused({}, { multipliers: {} })).toMatch(/the lower side is 4, the upper /);
	});

	it('is refused for tables that are no distributions in the signalling model', async () => {
		const result = await solved(wide);
		const whole = hybridOf(result);
		const [first = {}, second = {}] = whole.behaviours;
		const keys = Object.keys(second);
		const refused = (table: object) =>
			reasonOf(result, { ...whole, behaviours: [first, { ...second, ...table }] });
		expect(refused({ [keys[0] ?? '']: '-1' })).toMatch(/is negative/);
		expect(refused({ [keys[0] ?? '']: '1/2' })).toMatch(/do not sum to 1/);
	});

	it('proves nothing on problems without a hybrid maximum', async () => {
		const result = await solved(wide);
		const whole = hybridOf(result);
		const constraints = [{ terms: svetlichny.terms, relation: '<=', value: '1' }] as const;
		expect(reasonOf(result, whole, { ...wide, constraints })).toMatch(/no constraints/);
		expect(reasonOf(result, whole, { ...wide, ...pick(chsh) })).toMatch(/three parties or more/);
		const marginal = [...wide.terms, ['1', [[0, 0, 0]]]] as Problem['terms'];
		expect(reasonOf(result, whole, { ...wide, terms: marginal })).toMatch(/contains a marginal/);
	});
});

const pick = ({ outputs, terms }: Problem) => ({ outputs, terms });

describe('a facet certificate', () => {
	const facetOf = ({ certificate }: DoneResult): FacetCertificate => {
		if (certificate?.kind !== 'facet') throw new Error('no facet certificate');
		return certificate;
	};

	it('is refused for other strategies than independent ones that reach the maximum', async () => {
		const result = await solved({ ...chsh, quantity: 'facet' });
		const whole = facetOf(result);
		const [first = [], ...others] = whole.strategies;
		const refused = (change: Partial<FacetCertificate>) =>
			reasonOf(result, { ...whole, ...change });
		expect(refused({ maximum: '3' })).toBe('the local maximum is 2');
		expect(refused({ strategies: [[[0, 0]], ...others] })).toMatch(/not for 2 parties/);
		const worse = [
			[1, 1],
			[0, 0]
		];
		expect(refused({ strategies: [worse, ...others] })).toMatch(/does not reach/);
		expect(refused({ strategies: [first, first, ...others] })).toMatch(/affinely independent/);
		expect(refused({ strategies: others })).toMatch(/too few for a facet/);
	});

	it('is refused for a second functional that proves nothing', async () => {
		const result = await solved({ ...tilted, quantity: 'facet' });
		const whole = facetOf(result);
		const refused = (vanishing: FacetCertificate['vanishing']) =>
			reasonOf(result, { ...whole, vanishing });
		expect(refused(null)).toMatch(/too few for a facet/);
		expect(refused([])).toMatch(/a multiple of the first/);
		const itself = [...tilted.terms, ['-3', []]] as Problem['terms'];
		expect(refused(itself)).toMatch(/a multiple of the first/);
		expect(refused([['1', [[0, 0, 0]]]])).toMatch(/does not vanish/);
		const irrational = { ...tilted, terms: [['sqrt(2)', [[0, 0, 0]]]] } as const;
		expect(reasonOf(result, whole, { ...irrational, quantity: 'facet' })).toMatch(/rational/);
	});

	it('is refused where the strategies are too many to enumerate again', () => {
		const many = familyFunctional({ name: 'chained', n: 60 });
		const certificate = { kind: 'facet', maximum: '118', strategies: [], vanishing: null } as const;
		expect(checkFacet(many, certificate)).toMatchObject({
			reason: 'the enumeration of all strategies is too large to repeat here'
		});
	});
});

describe('a mixture of strategies', () => {
	const constraints = [
		{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1/3' },
		{ terms: [['1', [[1, 0, 0]]]], relation: '>=', value: '1/4' }
	] as const;
	const problem: Problem = { ...tilted, constraints };
	const mixtureOf = ({ certificate }: DoneResult): LocalMixtureCertificate => {
		if (certificate?.kind !== 'local-mixture') throw new Error('no mixture');
		return certificate;
	};

	it('is refused for weights, strategies, multipliers that do not fit', async () => {
		const result = await solved(problem);
		const whole = mixtureOf(result);
		const refused = (change: Partial<LocalMixtureCertificate>) =>
			reasonOf(result, { ...whole, ...change });
		const [first, ...others] = whole.mixture;
		if (!first) throw new Error('no strategy');
		const swapped = (change: object) => ({ mixture: [{ ...first, ...change }, ...others] });
		expect(refused(swapped({ weight: '-1' }))).toMatch(/weight 0 is no fraction from 0/);
		expect(refused(swapped({ strategy: [[0], [0]] }))).toMatch(/strategy 0: /);
		expect(refused({ mixture: others })).toMatch(/the weights sum to/);
		const zeros = [
			[0, 0],
			[0, 0]
		];
		expect(refused({ mixture: [{ weight: '1', strategy: zeros }] })).toMatch(
			/constraint 0 is violated/
		);
		expect(refused({ multipliers: ['0'] })).toMatch(/there are 1, not 2/);
		expect(refused({ multipliers: ['-1', '0'] })).toMatch(/constraint 0 has the wrong sign/);
		expect(refused({ multipliers: ['0', '1'] })).toMatch(/constraint 1 has the wrong sign/);
		expect(refused({ multipliers: ['x', '0'] })).toMatch(/constraint 0 is no fraction/);
		expect(refused({ multipliers: ['100', '0'] })).toMatch(/the lower side is/);
		const root = { terms: [['1', []]], relation: '<=', value: 'sqrt(2)' } as const;
		const irrational = { ...problem, constraints: [root, ...constraints.slice(1)] };
		expect(reasonOf(result, whole, irrational)).toMatch(/constraint 0 is irrational/);
	});

	it('is needed under constraints: a strategy alone proves nothing', async () => {
		const free = await solved(tilted);
		if (!free.certificate) throw new Error('no certificate');
		expect(reasonOf(free, free.certificate, problem)).toMatch(/a strategy alone proves nothing/);
	});
});
