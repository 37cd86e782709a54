/** Results that were never the solver's: each is refused, with what is wrong. */
import { describe, expect, it } from 'vitest';
import { CHSH_STRATEGY } from '../../../../tests/factories/chsh-strategy';
import { problemOn, quietControl, solved } from '../../../../tests/factories/solver-problem';
import { asResult } from '../../../../tests/support/certificate-changes';
import { asJson } from '../../../../tests/support/changed-json';
import { verifyResult } from '../certificates/verify';
import { familyFunctional } from '../scenario/families';
import { solve } from './solve';

const chsh = problemOn('local', familyFunctional({ name: 'chsh' }));

/** Whatever JSON a stored result may hold. */
const check = (...parts: object[]) => verifyResult(asResult(asJson(Object.assign({}, ...parts))));

const refusedFor = (reason: RegExp) => ({
	checked: false,
	reason: expect.stringMatching(reason)
});

describe('the value of a box', () => {
	const uniform = Object.fromEntries(
		[0, 1].flatMap((x) =>
			[0, 1].flatMap((y) =>
				[0, 1].flatMap((a) => [0, 1].map((b) => [`${a},${b}|${x},${y}`, '1/4']))
			)
		)
	);
	const withBox = (box: object) => ({ ...chsh, quantity: 'value', box });
	const table = (changes: object) =>
		withBox({ kind: 'table', probabilities: { ...uniform, ...changes } });
	const strategy = (changes: object) =>
		withBox({ kind: 'quantum', strategy: { ...CHSH_STRATEGY, ...changes } });

	it.each([
		['an unknown key', table({ '0,2|0,0': '0' }), /"0,2\|0,0" names no probability/],
		['a negative entry', table({ '0,0|0,0': '-1/4' }), /= -1\/4 is negative/],
		['an entry that is no number', table({ '0,0|0,0': 'x' }), /cannot be read/],
		['a state too short', strategy({ state: [[1, 0]] }), /state/],
		['no measurement', strategy({ measurements: [[], []] }), /./],
		[
			'a state of length 2',
			strategy({
				state: [
					[2, 0],
					[0, 0],
					[0, 0],
					[0, 0]
				]
			}),
			/normalised/
		]
	])('with %s', async (_, problem, reason) => {
		const result = await solved({
			...chsh,
			quantity: 'value',
			box: { kind: 'table', probabilities: uniform }
		});
		expect(verifyResult(result)).toMatchObject({ checked: true, exact: '0' });
		expect(check(result, { problem })).toMatchObject(refusedFor(reason));
	});
});

describe('printed numbers', () => {
	it('that contradict one another', async () => {
		const result = await solved({
			...chsh,
			quantity: 'see-saw',
			dimension: [2],
			starts: 2,
			state: 'free'
		});
		expect(verifyResult(result)).toMatchObject({ checked: true });
		const { lower } = result;
		if (lower === null) throw new Error('no lower side');
		expect(check(result, { upper: lower - 0.1 })).toMatchObject(
			refusedFor(/lower side .* above the upper/)
		);
		expect(check(result, { exact: 'x' })).toMatchObject(refusedFor(/"x" is no fraction/));
		expect(check(result, { exact: '2' })).toMatchObject(refusedFor(/2 is outside its own sides/));
		expect(check(result, { value: 2 })).toMatchObject(refusedFor(/2 is outside its own sides/));
	});

	it('of one quantity with the certificate of another', async () => {
		const result = await solved(chsh);
		for (const kind of [
			'local-mixture',
			'quantum-strategy',
			'npa-dual',
			'npa-exact',
			'enclosure',
			'hybrid',
			'facet'
		]) {
			const problem = kind === 'local-mixture' ? { ...chsh, quantity: 'facet' } : chsh;
			const certificate = { ...result.certificate, kind };
			const { quantity } = problem;
			expect(check(result, { quantity, problem, certificate })).toMatchObject(
				refusedFor(
					kind === 'local-mixture' ? /proves nothing on "facet"/ : /proves nothing on "local"/
				)
			);
		}
	});

	it('of another quantity than its problem asks for', async () => {
		const result = await solved(chsh);
		expect(check(result, { quantity: 'quantum' })).toMatchObject(
			refusedFor(/the result says "quantum", its problem "local"/)
		);
	});

	it('of a local maximum under constraints, with a strategy alone', async () => {
		const result = await solved(chsh);
		const constraints = [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1' }];
		expect(check(result, { problem: { ...chsh, constraints } })).toMatchObject(
			refusedFor(/a strategy alone proves nothing/)
		);
	});

	it('of a strategy that another one beats', async () => {
		const result = await solved(chsh);
		const worse = {
			...result.certificate,
			strategy: [
				[0, 0],
				[1, 1]
			],
			value: '-2'
		};
		expect(check(result, { certificate: worse })).toMatchObject(
			refusedFor(/another strategy reaches 2, more than -2/)
		);
	});
});

describe('a strategy in a prescribed state', () => {
	const seeSaw = { ...chsh, quantity: 'see-saw', dimension: [2], starts: 2 } as const;

	it('that does not fit the problem', async () => {
		const result = await solved({ ...seeSaw, state: 'maximally-entangled' });
		expect(verifyResult(result)).toMatchObject({ checked: true });
		const under = (changes: object) =>
			check(result, { problem: { ...result.problem, ...changes } });
		expect(under({ dimension: [3] })).toMatchObject(
			refusedFor(/not have the dimensions of the prescribed state/)
		);
		expect(under({ state: [[1, 0]] })).toMatchObject(refusedFor(/does not fit the dimensions/));
	});

	it('is not grown, nor begun from another', async () => {
		const fixed = { ...seeSaw, state: 'maximally-entangled' } as const;
		expect(await solve({ ...fixed, grow: 2 }, quietControl)).toMatchObject({
			status: 'failed',
			reason: 'grow: has no part with a given state or with constraints'
		});
		expect(await solve({ ...fixed, start: CHSH_STRATEGY }, quietControl)).toMatchObject({
			status: 'failed',
			reason: 'start: has no part with a given state'
		});
	});
});

describe('an enclosure of the quantum maximum', () => {
	it('whose sides are none, contradict, or cannot be read', async () => {
		const result = await solved({
			...chsh,
			quantity: 'quantum',
			levels: null,
			dimensions: null,
			gap: 1e-6
		});
		expect(verifyResult(result)).toMatchObject({ checked: true });
		const { certificate } = result;
		if (certificate?.kind !== 'enclosure') throw new Error('no enclosure');
		const changed = (changes: object) =>
			check(result, { certificate: { ...certificate, ...changes } });
		expect(changed({ lower: null, upper: null })).toMatchObject(refusedFor(/neither side/));
		expect(changed({ lower: { kind: 'npa-dual' } })).toMatchObject(refusedFor(/no strategy/));
		expect(changed({ upper: { kind: 'facet' } })).toMatchObject(
			refusedFor(/no multiplier of a relaxation/)
		);
		for (const upperLevel of [
			0,
			1.5,
			null,
			{},
			{ perParty: 0 },
			{ products: [1] },
			{ products: 1 }
		])
			expect(changed({ upperLevel })).toMatchObject(refusedFor(/its level cannot be read/));
		const constraints = [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1' }];
		expect(check(result, { problem: { ...result.problem, constraints } })).toMatchObject(
			refusedFor(/knows no constraints/)
		);
	});
});
