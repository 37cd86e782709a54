import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { QUANTITIES } from '../../../ledger/quantities';
import { claimProblem, readLevel, readQuantity, type QuantityChoice } from './claim-problem';
import { canonicalJson, hashProblem } from './queue-recomputation';
import { stationProblems } from './station-problems';

const CHOICE: QuantityChoice = {
	quantity: 'quantum',
	sense: 'max',
	level: '',
	nonNegative: false,
	dimension: ''
};
const two = {
	outputs: [
		[2, 2],
		[2, 2]
	],
	terms: []
};
const three = {
	outputs: [
		[2, 2],
		[2, 2],
		[2, 2]
	],
	terms: []
};

const problemOf = (choice: Partial<QuantityChoice>, subject = two) => {
	const whole = { ...CHOICE, ...choice };
	return claimProblem(whole, readQuantity(whole), subject, 60);
};

describe('the problem behind a claim', () => {
	it.each([
		[{ quantity: 'almost-quantum' }, { quantity: 'npa', level: '1+AB', nonNegative: false }],
		[{ quantity: 'macroscopic-locality' }, { quantity: 'npa', level: 1, nonNegative: true }],
		[
			{ quantity: 'npa', level: '1 + ab' },
			{ quantity: 'npa', level: '1+AB' }
		],
		[
			{ quantity: 'npa', level: '2', nonNegative: true },
			{ level: 2, nonNegative: true }
		],
		[
			{ quantity: 'quantum-dimension', dimension: '3' },
			{ dimension: [3, 3], state: 'free' }
		],
		[
			{ quantity: 'maximally-entangled', dimension: '2' },
			{ dimension: [2, 2], state: 'maximally-entangled' }
		],
		[
			{ quantity: 'local', sense: 'min' },
			{ quantity: 'local', sense: 'min' }
		]
	] as const)('%j', (choice, problem) => {
		expect(problemOf(choice)).toMatchObject({ problem });
	});

	it('for three parties takes one operator per party for almost quantum', () => {
		const found = problemOf({ quantity: 'almost-quantum' }, three);
		expect(found).toMatchObject({ problem: { level: { perParty: 1 } } });
		expect(problemOf({ quantity: 'macroscopic-locality' }, three)).toHaveProperty('why');
		expect(problemOf({ quantity: 'npa', level: '1+AB' }, three)).toHaveProperty('why');
	});

	it('takes the model of a hybrid maximum from its name', () => {
		const problem = (model: string) => ({ problem: { quantity: 'hybrid', model } });
		expect(problemOf({ quantity: 'hybrid' }, three)).toMatchObject(problem('svetlichny'));
		const found = problemOf({ quantity: 'hybrid-no-signalling' }, three);
		expect(found).toMatchObject(problem('no-signalling'));
		expect(problemOf({ quantity: 'hybrid' })).toHaveProperty('why');
	});

	it('is there, or a reason is, for every quantity', () => {
		for (const { key, solver } of QUANTITIES) {
			const choice = { quantity: key, level: '2', dimension: '2' };
			const found = problemOf(choice, solver === 'hybrid' ? three : two);
			expect('problem' in found).toBe(solver !== null);
		}
	});

	it('is a station’s where it is the same, so that it is solved once', () => {
		const hashes = stationProblems(two, 60).map(({ problem }) => hashProblem(problem));
		expect(new Set(hashes).size).toBe(8);
		for (const choice of [
			{ quantity: 'local' },
			{ quantity: 'no-signalling' },
			{ quantity: 'almost-quantum' },
			{ quantity: 'npa', level: '2' },
			{ quantity: 'quantum-dimension', dimension: '2' }
		] as const) {
			const found = problemOf(choice);
			expect('problem' in found && hashes.includes(hashProblem(found.problem))).toBe(true);
		}
	});
});

describe('a quantity in words', () => {
	it.each([
		[{ quantity: 'npa', level: '2', nonNegative: true }, 'NPA bound, level 2, P ≥ 0'],
		[{ quantity: 'quantum-dimension', dimension: '3' }, 'Quantum value in local dimension d = 3'],
		[{ quantity: 'quantum', sense: 'min' }, 'Quantum minimum'],
		[{ quantity: 'local' }, 'Local maximum']
	] as const)('%j', (choice, label) => {
		expect(readQuantity({ ...CHOICE, ...choice })).toMatchObject({ label, issues: [] });
	});

	it('never throws, whatever the level is', () => {
		fc.assert(
			fc.property(fc.string(), (text) => {
				const read = readLevel(text);
				expect('field' in read || 'level' in read).toBe(true);
			})
		);
	});
});

describe('the hash of a problem', () => {
	it('does not depend on the order of its keys', () => {
		fc.assert(
			fc.property(fc.dictionary(fc.string(), fc.jsonValue()), (value) => {
				const turned = Object.fromEntries(Object.entries(value).reverse());
				expect(canonicalJson(turned)).toBe(canonicalJson(value));
			})
		);
	});
});
