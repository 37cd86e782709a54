import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exactOfDouble, parseRational, ratio, type Rational } from '../nonlocality/exact/rational';
import { acceptedSet, toleranceFor } from './accepted-set';
import { RELATIONS, type ReadingChoice, type Relation } from './claim';
import { intersect, isEmpty, type Evidence } from './enclosure';
import { judge } from './judgement';
import { readStatedValue } from './stated-value';
import { deriveVerdict, mailWorthy, type RecomputationState } from './verdict';

const DONE: RecomputationState = { kind: 'done' };

const r = (text: string): Rational => parseRational(text) ?? expect.fail(`${text} is no rational`);

function evidence(
	lower: string | null,
	upper: string | null,
	worth: Evidence['worth'] = 'guaranteed'
): Evidence {
	return {
		worth,
		lower: lower === null ? null : r(lower),
		upper: upper === null ? null : r(upper),
		lowerLabel: 'an explicit quantum strategy in dimension 2',
		upperLabel: 'NPA level 2'
	};
}

function verdictOf(
	printed: string,
	relation: Relation,
	known: readonly Evidence[],
	recomputation: RecomputationState = DONE,
	choice: ReadingChoice = 'as-printed'
) {
	const reading = readStatedValue(printed, choice);
	return deriveVerdict({
		reading,
		relation,
		evidence: known,
		recomputation,
		quantity: 'Quantum maximum'
	});
}

// I3322: 0.2508753845 and level 2's 0.25093972 (Pal, Vertesi, Phys. Rev. A 82, 022116 (2010),
// arXiv:1006.3032; from memory); the lower side is a see-saw's that stopped early.
const I3322 = evidence('0.25085221', '0.25093973');
// CHSH: 2 sqrt 2 (Cirel'son, Lett. Math. Phys. 4, 93 (1980)).
const CHSH = evidence('2.8284271245', '2.8284271249');

describe('deriveVerdict', () => {
	it.each<[string, Relation, Evidence, string, string]>([
		['0.2509', '=', I3322, 'agreement', 'within'],
		['0.2515', '=', I3322, 'discrepancy', 'above-upper-bound'],
		['0.2501', '=', I3322, 'discrepancy', 'below-lower-bound'],
		['0.25088', '=', I3322, 'open', 'not-settled'],
		['0.26', '<=', I3322, 'agreement', 'within'],
		['0.2501', '<=', I3322, 'discrepancy', 'below-lower-bound'],
		['0.25', '>=', I3322, 'agreement', 'within'],
		['0.26', '>=', I3322, 'discrepancy', 'above-upper-bound'],
		['2*sqrt(2)', '=', CHSH, 'agreement', 'within'],
		['2.8284', '=', CHSH, 'agreement', 'within'],
		['2.82843', '=', CHSH, 'agreement', 'within'],
		['2.828428', '=', CHSH, 'discrepancy', 'last-digits'],
		['2.82842', '=', CHSH, 'discrepancy', 'last-digits'],
		['2.82841', '=', CHSH, 'discrepancy', 'below-lower-bound'],
		['2', '=', evidence('2', '2'), 'agreement', 'proved'],
		['2.0', '=', evidence('2', '2'), 'agreement', 'within'],
		['4/3', '=', evidence('4/3', '4/3'), 'agreement', 'proved'],
		['4/3', '=', evidence('1.33333333', '1.33333334'), 'agreement', 'within'],
		['0.2', '=', evidence('0.1', null), 'open', 'not-settled'],
		['0.05', '=', evidence('0.1', null), 'discrepancy', 'below-lower-bound'],
		['0.05', '>=', evidence('0.1', null), 'agreement', 'within']
	])('%s, %s', (printed, relation, known, status, reasonCode) => {
		expect(verdictOf(printed, relation, [known])).toMatchObject({ status, reasonCode });
	});

	it('counts no tolerance when value and enclosure are both exact', () => {
		const near = `2.${'0'.repeat(20)}1`;
		const verdict = verdictOf(near, '=', [evidence('2', '2')], DONE, 'exact');
		expect(verdict).toMatchObject({ status: 'discrepancy', reasonCode: 'last-digits' });
		expect(verdictOf(near, '=', [CHSH_LIKE_TWO], DONE, 'exact').status).toBe('agreement');
	});
	const CHSH_LIKE_TWO = evidence('1.99999999', '2.00000001');

	it('widens by 1e-7 of the value, or a tenth of the half-width where that is less', () => {
		const tau = (printed: string) => toleranceFor(readStatedValue(printed, 'as-printed'), false);
		expect(tau('5').equals(r('0.0000005'))).toBe(true);
		expect(tau('0.25').equals(r('0.0000001'))).toBe(true);
		expect(tau('1/4').equals(r('0.0000001'))).toBe(true);
		expect(tau('0.25087538').equals(r('0.0000000005'))).toBe(true);
	});

	it('explains a discrepancy with its size rounded down, as on the board', () => {
		expect(verdictOf('0.2515', '=', [I3322]).reason).toBe(
			'The claimed value lies more than 0.0005 above the guaranteed upper bound (NPA level 2), so it cannot be the quantum maximum to the digits printed.'
		);
		expect(verdictOf('0.2501', '<=', [I3322]).reason).toBe(
			'The claimed upper bound lies more than 0.0007 below the guaranteed lower bound (an explicit quantum strategy in dimension 2), so the quantum maximum is larger than claimed.'
		);
	});

	it('says an exact distance as it is', () => {
		expect(verdictOf('4', '=', [evidence('2', '2')]).reason).toContain(
			'lies 2 above the exact value 2'
		);
	});

	it('shows both numbers when consistent, not settled', () => {
		expect(verdictOf('0.25088', '=', [I3322]).reason).toBe(
			'Consistent, not settled: the quantum maximum lies between 0.250852 and 0.250940, which is wider than the printed precision.'
		);
	});

	it('shows the slack of a true but loose bound', () => {
		const loose = verdictOf('0.26', '<=', [I3322]);
		expect(loose.slack).toBe('0.004');
		expect(loose.reason).toContain('with a slack of more than 0.004');
		expect(verdictOf('0.2509', '<=', [I3322]).slack).toBeUndefined();
	});

	it.each<[string, Relation, Evidence, string]>([
		[
			'0.437',
			'>=',
			evidence('0.4369435', '0.4369445'),
			'lies between 0.4369435 and 0.4369445, so the claimed lower bound holds to the digits printed (0.437 stands for 0.4365 or more); exactly 0.437 is more than 0.00005 too high.'
		],
		[
			'2.83',
			'>=',
			CHSH,
			'holds to the digits printed (2.83 stands for 2.825 or more); exactly 2.83 is more than 0.001 too high.'
		],
		[
			'2.828',
			'<=',
			CHSH,
			'holds to the digits printed (2.828 stands for 2.8285 or less); exactly 2.828 is more than 0.0004 too low.'
		],
		[
			'0.2509',
			'<=',
			I3322,
			'holds to the digits printed (0.2509 stands for 0.25095 or less); whether exactly 0.2509 holds is not settled.'
		],
		['2.82843', '<=', CHSH, 'so the claimed upper bound holds.'],
		['2.8284', '>=', CHSH, 'so the claimed lower bound holds.'],
		['2*sqrt(2)', '<=', CHSH, 'so the claimed upper bound holds to 1e-7 of its size.']
	])('says how well %s as %s holds', (printed, relation, known, ending) => {
		const { status, reason } = verdictOf(printed, relation, [known]);
		expect(status).toBe('agreement');
		expect(reason.endsWith(ending) ? ending : reason).toBe(ending);
	});

	it('never says a bound simply holds that the printed number would not', () => {
		fc.assert(
			fc.property(
				fc.integer({ min: -9999, max: 9999 }),
				fc.integer({ min: -99_999_999, max: 99_999_999 }),
				fc.integer({ min: 0, max: 50_000 }),
				fc.constantFrom<Relation>('<=', '>='),
				(printed, lower, width, relation) => {
					const text = (printed / 1000).toFixed(3);
					const known = evidence(`${lower}/10000000`, `${lower + width}/10000000`);
					const { status, reason } = verdictOf(text, relation, [known]);
					if (status !== 'agreement') return;
					// In integers of the seventh place.
					const value = printed * 10_000;
					const strictly = relation === '<=' ? lower + width <= value : lower >= value;
					expect(reason.includes('to the digits printed')).toBe(!strictly);
				}
			)
		);
	});

	it.each<[RecomputationState, string, RegExp]>([
		[{ kind: 'not-run' }, 'not-run', /Not recomputed yet/],
		[{ kind: 'running' }, 'running', /is running/],
		[{ kind: 'failed', why: 'too many strategies' }, 'failed', /too many strategies\./],
		[{ kind: 'no-solver' }, 'no-solver', /^No solver for this quantity/]
	])('is Open while %j, with the reason', (state, reasonCode, reason) => {
		const verdict = verdictOf('1', '=', [], state);
		expect(verdict).toMatchObject({ status: 'open', reasonCode, enclosure: null });
		expect(verdict.reason).toMatch(reason);
	});

	it('lets proved bounds settle a claim before its own recomputation has ended', () => {
		const verdict = verdictOf('0.2515', '=', [evidence(null, '0.25093973')], { kind: 'running' });
		expect(verdict.status).toBe('discrepancy');
	});

	it('is Open with an alarm when guaranteed bounds contradict each other', () => {
		const verdict = verdictOf('0.5', '=', [evidence('0', '0.4'), evidence('0.6', '1')]);
		expect(verdict).toMatchObject({ status: 'open', reasonCode: 'contradictory', enclosure: null });
	});

	it('asks numerical evidence, then people, only where proofs leave it open', () => {
		const wide = evidence('0', '1');
		const numerical = evidence('0.2508', '0.2509', 'numerical');
		const person = evidence('0.5', '0.5', 'person');
		const byNumbers = verdictOf('0.251', '=', [wide, numerical, person]);
		expect(byNumbers).toMatchObject({ status: 'agreement', enclosure: { worth: 'numerical' } });
		expect(byNumbers.reason).toContain('numerical evidence, not on a proof');
		const byPerson = verdictOf('0.5', '=', [wide, person]);
		expect(byPerson).toMatchObject({ status: 'agreement', enclosure: { worth: 'person' } });
		expect(byPerson.reason).toContain('accepted reproduction');
	});

	it('says when a reproduction contradicts the certificate, and does not follow it', () => {
		const verdict = verdictOf('0.2515', '=', [I3322, evidence('0.2515', '0.2515', 'person')]);
		expect(verdict.status).toBe('discrepancy');
		expect(verdict.reason).toContain('contradicts the certificate');
	});

	it('stores bounds rounded outward', () => {
		const { enclosure } = verdictOf('0.2509', '=', [I3322]);
		expect(r(enclosure?.lower ?? '').compare(r('0.25085221'))).toBeLessThanOrEqual(0);
		expect(r(enclosure?.upper ?? '').compare(r('0.25093973'))).toBeGreaterThanOrEqual(0);
	});
});

describe('mailWorthy', () => {
	it("is a discrepancy that is more than a solver's last digits", () => {
		const clear = { ...verdictOf('0.2515', '=', [I3322]), diagnosis: [] };
		expect(mailWorthy(clear)).toBe(true);
		const tolerance = { kind: 'solver-tolerance', value: '2', text: '' } as const;
		expect(mailWorthy({ ...clear, diagnosis: [tolerance] })).toBe(false);
		expect(mailWorthy({ ...verdictOf('2.828428', '=', [CHSH]), diagnosis: [] })).toBe(false);
		expect(mailWorthy({ ...verdictOf('0.2509', '=', [I3322]), diagnosis: [] })).toBe(false);
	});
});

describe('judge, for every claim and enclosure', () => {
	const relation = fc.constantFrom(...RELATIONS);
	const printed = fc
		.tuple(fc.integer({ min: -2000, max: 2000 }), fc.integer({ min: 0, max: 3 }))
		.map(([units, places]) => (units / 10 ** places).toFixed(places));
	const end = fc.double({ min: -2000, max: 2000, noNaN: true });
	const known = fc
		.tuple(end, fc.double({ min: 0, max: 10, noNaN: true }), fc.boolean(), fc.boolean())
		.map(([low, width, hasLower, hasUpper]): Evidence => ({
			...evidence(null, null),
			lower: hasLower ? exactOfDouble(low) : null,
			upper: hasUpper ? exactOfDouble(low).add(exactOfDouble(width)) : null
		}));
	const judgeOf = (text: string, rel: Relation, list: readonly Evidence[]) =>
		judge({
			reading: readStatedValue(text, 'as-printed'),
			relation: rel,
			evidence: list,
			recomputation: DONE
		}).status;

	it('agrees only when every value of the enclosure is accepted, disagrees only when none is', () => {
		fc.assert(
			fc.property(printed, relation, known, (text, rel, e) => {
				const set = acceptedSet(readStatedValue(text, 'as-printed'), rel, false);
				const accepts = (x: Rational) =>
					(!set.low || x.compare(set.low) >= 0) && (!set.high || x.compare(set.high) <= 0);
				const status = judgeOf(text, rel, [e]);
				const samples = [e.lower, e.upper].filter((x) => x !== null);
				if (e.lower && e.upper) samples.push(e.lower.add(e.upper).div(2));
				for (const x of samples) {
					if (status === 'agreement') expect(accepts(x)).toBe(true);
					if (status === 'discrepancy') expect(accepts(x)).toBe(false);
				}
				expect(['agreement', 'discrepancy', 'open']).toContain(status);
			})
		);
	});

	it('never takes back a settled verdict when more is proved', () => {
		fc.assert(
			fc.property(printed, relation, known, known, (text, rel, first, second) => {
				const before = judgeOf(text, rel, [first]);
				fc.pre(before !== 'open' && !isEmpty(intersect(first, second)));
				const both = intersect(first, second);
				const exact = both.lower && both.upper && both.lower.equals(both.upper);
				fc.pre(!exact); // an exact enclosure is judged without tolerance
				expect(judgeOf(text, rel, [first, second])).toBe(before);
			})
		);
	});

	it('does not depend on the order of the evidence', () => {
		fc.assert(
			fc.property(printed, relation, fc.array(known, { maxLength: 4 }), (text, rel, list) => {
				expect(judgeOf(text, rel, list)).toBe(judgeOf(text, rel, [...list].reverse()));
			})
		);
	});

	it('takes "=" as both inequalities together', () => {
		fc.assert(
			fc.property(printed, known, (text, e) => {
				const equal = judgeOf(text, '=', [e]);
				const bounds = [judgeOf(text, '<=', [e]), judgeOf(text, '>=', [e])];
				const together = bounds.includes('discrepancy')
					? 'discrepancy'
					: bounds.includes('open')
						? 'open'
						: 'agreement';
				expect(equal).toBe(together);
			})
		);
	});

	it('compares ends exactly: one 10^-30 decides', () => {
		const tiny = ratio(1n, 10n ** 30n);
		const high = readStatedValue('0.25', 'as-printed').high.add(r('0.0000001'));
		const at = (lower: Rational) => judgeOf('0.25', '<=', [{ ...evidence('0', null), lower }]);
		expect(at(high)).toBe('open');
		expect(at(high.add(tiny))).toBe('discrepancy');
	});
});
