import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { floatingCertificate } from '../../../../tests/factories/floating-certificate';
import { PATIENT, npaProblem } from '../../../../tests/factories/npa-problem';
import type { Level, ProblemOf } from '../problem';
import { npaBound } from './npa-bound';
import { functionalToMaximise } from '../scenario/problem-functional';
import { checkMomentCertificate } from '../certificates/check-moments';
import type { MomentCertificate } from '../certificates/types';

function solved(problem: ProblemOf<'npa'>) {
	const g = functionalToMaximise(problem);
	const { certificate: found, lower, upper: proved } = npaBound(problem, g, PATIENT);
	const certificate = found?.kind === 'npa-exact' ? floatingCertificate(found) : found;
	if (certificate?.kind !== 'npa-dual' || lower === null || proved === null)
		throw new Error('no certificate');
	const upper = Math.max(proved, certificate.bound);
	const check = (changed: MomentCertificate, about = problem) =>
		checkMomentCertificate(about, g, changed);
	return { problem, certificate, lower, upper, check };
}

const plain = solved(npaProblem({ name: 'i3322' }, '1+AB'));
const withRows = solved(npaProblem({ name: 'cglmp', d: 3 }, 1, { nonNegative: true }));
const irrational = solved(npaProblem({ name: 'tilted-chsh', alpha: 'sqrt(2)' }, 1));
const withConstraint = solved(
	npaProblem({ name: 'chsh' }, '1+AB', {
		constraints: [{ terms: [['1', [[0, 0, 0]]]], relation: '<=', value: 'sqrt(2)/8' }]
	})
);
const all = { plain, withRows, irrational, withConstraint };

/** Far more than the gap between the two sides. */
const WELL_BELOW = 1e-6;

describe('a certificate as the solver wrote it', () => {
	test.each(Object.entries(all))('%s is checked', (_, { certificate, lower, upper, check }) => {
		const outcome = check(JSON.parse(JSON.stringify(certificate)) as MomentCertificate);
		if (!outcome.checked) throw new Error(outcome.reason);
		expect(outcome.upper).toBeLessThanOrEqual(upper);
		expect(outcome.lower).toBeGreaterThanOrEqual(lower);
		expect(upper - lower).toBeLessThan(1e-8);
	});
});

describe('a changed certificate is caught, or still proves what it prints', () => {
	/** What the relaxation's optimum is known to lie between. */
	const sound = ({ lower, upper, check }: typeof plain, changed: MomentCertificate) => {
		const outcome = check(changed);
		if (!outcome.checked) return;
		expect(outcome.upper ?? NaN).toBeGreaterThanOrEqual(lower);
		expect(outcome.upper ?? NaN).toBeLessThanOrEqual(changed.bound);
		if (outcome.lower === null) return;
		expect(outcome.lower).toBeLessThanOrEqual(upper);
		expect(outcome.lower).toBeGreaterThanOrEqual(changed.feasibleValue ?? NaN);
	};
	const change = fc.oneof(
		fc.double({ min: -1, max: 1, noNaN: true }).map((by) => (x: number) => x + by),
		fc.double({ min: -1e-9, max: 1e-9, noNaN: true }).map((by) => (x: number) => x + by),
		fc.constantFrom(
			(x: number) => -x,
			() => 0,
			() => NaN,
			() => Infinity,
			(x: number) => x * 2
		)
	);

	describe.each(Object.entries(all))('%s', (_, subject) => {
		const { certificate } = subject;
		test('one entry of the multiplier', () => {
			fc.assert(
				fc.property(fc.nat(certificate.multiplier.length - 1), change, (place, by) => {
					const multiplier = certificate.multiplier.map((x, i) => (i === place ? by(x) : x));
					sound(subject, { ...certificate, multiplier });
				})
			);
			expect(certificate.multiplier.length).toBeGreaterThan(0);
		});
		test('one moment', () => {
			const moments = certificate.moments ?? [];
			fc.assert(
				fc.property(fc.nat(moments.length - 1), change, (place, by) => {
					const changed = moments.map((x, i) => (i === place ? by(x) : x));
					sound(subject, { ...certificate, moments: changed });
				})
			);
			expect(moments.length).toBeGreaterThan(0);
		});
		test('a bound that is too good', () => {
			const { check, lower, upper } = subject;
			const low = { ...certificate, bound: lower - WELL_BELOW };
			expect(check(low)).toMatchObject({ checked: false });
			const high = { ...certificate, feasibleValue: upper + WELL_BELOW };
			expect(check(high)).toMatchObject({ checked: false });
		});
		test('a multiplier that is all zero, or scaled', () => {
			const zero = certificate.multiplier.map(() => 0);
			expect(subject.check({ ...certificate, multiplier: zero }).checked).toBe(false);
			const double = certificate.multiplier.map((x) => 2 * x);
			expect(subject.check({ ...certificate, multiplier: double }).checked).toBe(false);
		});
	});

	const rejected = (subject: typeof plain, changed: Partial<MomentCertificate>, why: RegExp) => {
		const outcome = subject.check({ ...subject.certificate, ...changed });
		expect(outcome.checked).toBe(false);
		if (!outcome.checked) expect(outcome.reason).toMatch(why);
	};
	test('lists of monomials', () => {
		const { monomials } = plain.certificate;
		rejected(plain, { monomials: monomials.slice(1) }, /identity is missing/);
		rejected(plain, { monomials: [...monomials, ...monomials.slice(0, 1)] }, /occurs twice/);
		rejected(
			plain,
			{
				monomials: [
					[[], []],
					[[[0, 0]], [[1, 0]]]
				]
			},
			/not closed/
		);
		rejected(
			plain,
			{
				monomials: [
					...monomials,
					[
						[
							[0, 0],
							[1, 0]
						],
						[]
					]
				]
			},
			/not belong/
		);
		rejected(plain, { monomials: [...monomials, [[[0, 1]], []]] }, /not a word/);
		rejected(
			plain,
			{
				monomials: [
					...monomials,
					[
						[
							[0, 0],
							[0, 0]
						],
						[]
					]
				]
			},
			/not reduced/
		);
		rejected(plain, { monomials: [[[], []]] }, /lack a moment/);
	});
	test('fewer monomials than the level has still bound it from above, not from below', () => {
		// Level 1 is part of 1+AB: its multiplier proves a (looser) upper bound there.
		const { certificate } = solved(npaProblem({ name: 'i3322' }, 1));
		const both = plain.check(certificate);
		expect(both).toMatchObject({ checked: false });
		const upperOnly = plain.check({ ...certificate, moments: null, feasibleValue: null });
		expect(upperOnly.checked && upperOnly.upper).toBeGreaterThan(0.3749);
		expect(upperOnly.checked && upperOnly.lower).toBe(null);
	});
	test('a bound from a higher level is not one of a lower', () => {
		const lowerLevel = { ...plain.problem, level: 1 as Level };
		expect(plain.check(plain.certificate, lowerLevel)).toMatchObject({ checked: false });
	});
	test('row multipliers', () => {
		rejected(plain, { rowMultipliers: { '0,0|0,0': 1 } }, /not imposed/);
		const { rowMultipliers } = withRows.certificate;
		const [key = ''] = Object.keys(rowMultipliers);
		rejected(withRows, { rowMultipliers: { ...rowMultipliers, [key]: -1 } }, /negative/);
		rejected(withRows, { rowMultipliers: { ...rowMultipliers, x: 1 } }, /no row/);
		rejected(withRows, { rowMultipliers: { ...rowMultipliers, '0,9|0,0': 1 } }, /output 9/);
		rejected(withRows, { rowMultipliers: {} }, /proves/);
		const without = { ...withRows.problem, nonNegative: false };
		expect(withRows.check(withRows.certificate, without)).toMatchObject({ checked: false });
	});
	test('moments with a negative probability are no lower side of the tighter relaxation', () => {
		const { certificate } = solved(npaProblem({ name: 'cglmp', d: 3 }, 1));
		const { monomials, multiplier, moments, feasibleValue, bound } = certificate;
		rejected(
			withRows,
			{ monomials, multiplier, rowMultipliers: {}, moments, feasibleValue, bound },
			/negative probability/
		);
	});
	test('constraint multipliers', () => {
		rejected(withConstraint, { constraintMultipliers: [-1] }, /negative/);
		rejected(withConstraint, { constraintMultipliers: [] }, /proves/);
		rejected(plain, { constraintMultipliers: [1] }, /no constraint/);
	});
	test('sizes', () => {
		rejected(plain, { multiplier: plain.certificate.multiplier.slice(1) }, /wrong size/);
		rejected(plain, { moments: plain.certificate.moments?.slice(1) ?? [] }, /wrong number/);
		rejected(plain, { bound: NaN }, /not finite/);
		rejected(plain, { shift: -1 }, /not proved/);
		rejected(plain, { shift: 1 }, /not proved|proves/);
		rejected(plain, { moments: null }, /together/);
	});
});
