import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseRational, type Rational } from '../nonlocality/exact/rational';
import type { ReadingChoice, Relation } from './claim';
import { DIAGNOSIS_KINDS, diagnose, type OtherValue } from './diagnosis';
import { parseExpression } from '../nonlocality/scenario/expression';
import { correlatorGame } from './correlator-game';
import { judge } from './judgement';
import { knownNormalisations, type NormalisationContext } from './normalisations';
import { readStatedValue } from './stated-value';

const r = (text: string): Rational => parseRational(text) ?? expect.fail(`${text} is no rational`);

interface Case {
	readonly printed: string;
	readonly between: readonly [lower: string, upper: string];
	readonly relation?: Relation;
	readonly choice?: ReadingChoice;
	readonly quantity?: string;
	readonly others?: readonly OtherValue[];
	readonly context?: NormalisationContext;
	readonly indexBase?: OtherValue;
}

function diagnosisOf(c: Case) {
	const reading = readStatedValue(c.printed, c.choice ?? 'as-printed');
	const relation = c.relation ?? '=';
	const enclosure = { lower: r(c.between[0]), upper: r(c.between[1]) };
	const known = { ...enclosure, worth: 'guaranteed', lowerLabel: '', upperLabel: '' } as const;
	const { status, reasonCode } = judge({
		reading,
		relation,
		evidence: [known],
		recomputation: { kind: 'done' }
	});
	return diagnose({
		reading,
		relation,
		quantity: c.quantity ?? 'quantum',
		status,
		reasonCode,
		enclosure,
		others: c.others ?? [],
		normalisations: knownNormalisations(c.context ?? {}),
		indexBaseAlternative: c.indexBase ?? null
	});
}

function other(label: string, lower: string, upper: string, matchesMethod = false): OtherValue {
	return {
		label,
		quantity: 'npa',
		fields: { level: label },
		lower: r(lower),
		upper: r(upper),
		matchesMethod
	};
}

const CHSH = ['2.8284271245', '2.8284271249'] as const;
const I3322 = ['0.25085221', '0.25093973'] as const;
const ALMOST = other('the almost-quantum bound (NPA level 1+AB)', '0.25147089', '0.25147091');

describe('diagnose', () => {
	it.each<[string, Case, string]>([
		['solver-tolerance', { printed: '2.828428', between: CHSH }, '2.828427125'],
		['other-quantity', { printed: '0.2515', between: I3322, others: [ALMOST] }, '0.2515'],
		[
			'other-normalisation',
			{ printed: '0.2071', between: CHSH, context: { family: { name: 'chsh' } } },
			'0.2071'
		],
		['truncated', { printed: '2.8208', between: ['2.82088', '2.82089'] }, '2.8208'],
		['percent', { printed: '82.84', between: ['0.82842', '0.82843'] }, '82.84 %'],
		['percent', { printed: '0.4286 %', between: ['0.42857', '0.42858'] }, '0.4286'],
		['complement', { printed: '0.1716', between: ['0.82842', '0.82843'] }, '0.8284'],
		['sign', { printed: '-2.8284', between: CHSH }, '2.8284'],
		[
			'logarithm-base',
			{ printed: '0.6931', between: ['1', '1'], quantity: 'min-entropy' },
			'0.9999'
		],
		[
			'index-base',
			{ printed: '2.5', between: CHSH, indexBase: other('counted from 1', '2.49', '2.51') },
			'2.5'
		],
		['relation-reversed', { printed: '2.5', relation: '<=', between: CHSH }, '2.5'],
		['digits-swapped', { printed: '7.3190', between: ['7.3910362600', '7.3910362605'] }, '7.3910'],
		['digit-missing', { printed: '2.884', between: CHSH }, '2.8284'],
		['digit-mistyped', { printed: '2.8274', between: CHSH }, '2.8284']
	])('finds %s', (kind, c, value) => {
		expect(diagnosisOf(c).map((d) => [d.kind, d.value])).toContainEqual([kind, value]);
	});

	it.each([
		['1.9', ['2', '2']],
		['1.9', ['1.9999999999', '2.0000000001']],
		['-0.9', ['-1', '-1']],
		['0.9', ['0.9999999999', '1']]
	] as const)('a whole number is never cut off to %s', (printed, between) => {
		const kinds = diagnosisOf({ printed, between }).map(({ kind }) => kind);
		expect(kinds).not.toContain('truncated');
		expect(kinds).not.toContain('solver-tolerance');
	});

	it('names the bound alone where the relation is meant the other way', () => {
		const found = diagnosisOf({ printed: '>= 2.8285', relation: '>=', between: CHSH });
		expect(found.find(({ kind }) => kind === 'relation-reversed')?.text).toBe(
			'the relation is meant the other way: at most 2.8285'
		);
	});

	it('completes "It would agree if" with the arithmetic', () => {
		const [quantity] = diagnosisOf({ printed: '0.2515', between: I3322, others: [ALMOST] });
		expect(quantity?.text).toBe(
			'the paper meant the almost-quantum bound (NPA level 1+AB), which is 0.2514709, printed 0.2515'
		);
		const [normalisation] = diagnosisOf({
			printed: '0.8536',
			between: CHSH,
			context: { family: { name: 'chsh' } }
		});
		expect(normalisation?.text).toBe(
			'the paper gives it as the winning probability of the game: 1/8 × 2.8284271 + 1/2 = 0.8535534, printed 0.8536'
		);
		expect(normalisation).toMatchObject({ scale: '1/8', shift: '1/2' });
	});

	it('puts the quantity of the stated method first', () => {
		const close = other('the bound of NPA level 1', '0.25146', '0.25148');
		const found = diagnosisOf({
			printed: '0.2515',
			between: I3322,
			others: [close, { ...ALMOST, matchesMethod: true }]
		});
		expect(found.map((d) => d.fields?.['level'])).toEqual([ALMOST.label, close.label]);
	});

	it('finds a value entered as cut off that was rounded', () => {
		const rounded = {
			printed: '2.8209',
			between: ['2.8208812', '2.8208814'],
			choice: 'truncated'
		} as const;
		const [first] = diagnosisOf(rounded);
		expect(first).toMatchObject({ kind: 'truncated', value: '2.8209' });
		expect(first?.text).toBe('the digits were rounded, not cut off: 2.820881, printed 2.8209');
		const kinds = diagnosisOf({ ...rounded, printed: '2.8211' }).map(({ kind }) => kind);
		expect(kinds).not.toContain('truncated');
	});

	it('combines truncation with another quantity, and says so', () => {
		const found = diagnosisOf({ printed: '0.2514', between: I3322, others: [ALMOST] });
		expect(found[0]).toMatchObject({ kind: 'other-quantity', truncated: true, value: '0.2514' });
		expect(found[0]?.text).toContain('cut off to 0.2514');
	});

	it('never calls the last digit mistyped', () => {
		expect(diagnosisOf({ printed: '2.8289', between: CHSH })).toEqual([]);
		expect(diagnosisOf({ printed: '5', between: ['2', '2'] })).toEqual([]);
	});

	it('says nothing in Agreement', () => {
		expect(diagnosisOf({ printed: '2.8284', between: CHSH, others: [ALMOST] })).toEqual([]);
	});

	it('offers on Open only another quantity or normalisation that its own enclosure settles', () => {
		const wide = other('wide', '0.2', '0.3');
		const tight = other('tight', '0.250879', '0.250881');
		const found = diagnosisOf({ printed: '0.25088', between: I3322, others: [wide, tight] });
		expect(found.map((d) => [d.kind, d.quantity, d.fields?.['level']])).toEqual([
			['other-quantity', 'npa', 'tight']
		]);
	});

	it('explains nothing by an enclosure that almost any change is consistent with', () => {
		expect(diagnosisOf({ printed: '5.9', between: ['2', '4'] })).toEqual([]);
	});

	it('keeps the prescribed order', () => {
		const order = ['solver-tolerance', 'other-quantity', 'other-normalisation', 'truncated'];
		expect(DIAGNOSIS_KINDS.slice(0, 4)).toEqual(order);
		const printed = fc.integer({ min: -99999, max: 99999 }).map((n) => (n / 10000).toFixed(4));
		fc.assert(
			fc.property(printed, fc.integer({ min: 0, max: 90000 }), (text, n) => {
				const between = [String(n / 10000), String(n / 10000 + 1e-7)] as const;
				const found = diagnosisOf({ printed: text, between, others: [ALMOST] }).filter(
					(d) => !d.truncated
				);
				const places = found.map((d) => DIAGNOSIS_KINDS.indexOf(d.kind));
				expect(places).toEqual([...places].sort((a, b) => a - b));
			})
		);
	});

	it('finds the printed value behind any one slip, and what it proposes does agree', () => {
		const digits = fc.integer({ min: 10000, max: 99999 }).map((n) => (n / 10000).toFixed(4));
		fc.assert(
			fc.property(digits, fc.nat(2), fc.integer({ min: 1, max: 9 }), (text, at, step) => {
				const place = [0, 2, 3][at] ?? 0;
				const digit = (Number(text.charAt(place)) + step) % 10;
				const wrong = `${text.slice(0, place)}${digit}${text.slice(place + 1)}`;
				const found = diagnosisOf({ printed: wrong, between: [text, text] });
				expect(found.map((d) => d.kind)).toContain('digit-mistyped');
				for (const { kind, value } of found) {
					if (!kind.startsWith('digit')) continue;
					const { low, high } = readStatedValue(value, 'as-printed');
					expect(low.compare(r(text))).toBeLessThanOrEqual(0);
					expect(high.compare(r(text))).toBeGreaterThanOrEqual(0);
				}
			})
		);
	});
});

describe('knownNormalisations', () => {
	const mapped = (context: NormalisationContext, value: string) =>
		knownNormalisations(context).map(({ scale, shift }) =>
			Number(r(value).mul(scale).add(shift).valueOf().toFixed(6))
		);

	it('knows CHSH = 4 CH + 2 and the winning probability 1/2 + S/8, from both sides', () => {
		expect(mapped({ family: { name: 'chsh' } }, '2.8284271')).toEqual([0.207107, 0.853553]);
		// A functional entered as CH, where claimed = CHSH/4 - 1/2.
		const asCh = { family: { name: 'chsh' }, fromFamily: { scale: r('1/4'), shift: r('-1/2') } };
		expect(mapped(asCh, '0.2071068')).toEqual([2.828427, 0.853553]);
	});

	it('knows I3322 in correlators, 4 I + 4', () => {
		expect(mapped({ family: { name: 'i3322' } }, '0.25')).toEqual([5]);
		expect(
			mapped(
				{
					outputs: [
						[2, 2, 2],
						[2, 2, 2]
					]
				},
				'0.25'
			)
		).toContain(5);
	});

	it('knows the complementary form B of CGLMP, I_3 = 2 + 3 (1 - B)', () => {
		const [b, fromZero] = mapped({ family: { name: 'cglmp', parameter: 3 } }, '2.9148542');
		expect(2 + 3 * (1 - (b ?? 0))).toBeCloseTo(2.9148542, 5);
		expect(fromZero).toBeCloseTo(1 - (b ?? 0), 5);
	});

	it('knows the winning probability of any game of correlators, and the multiple of the local maximum', () => {
		const context = { game: { weight: r('12'), constant: r('0') }, localMaximum: r('6') };
		// The elegant inequality: 4 sqrt 3 = 6.9282.
		expect(mapped(context, '6.9282032')).toEqual([0.788675, 0.928203, 1.154701]);
	});

	it('finds the game behind a sum of correlators, and none behind marginals', () => {
		const game = (expression: string) =>
			correlatorGame(parseExpression(expression, { indexBase: 0 }).functional);
		// 1/2 + S/8 for CHSH: weight 4. A constant is taken off first.
		const chsh = game('A0 B0 + A0 B1 + A1 B0 - A1 B1');
		expect([chsh?.weight.toFraction(), chsh?.constant.toFraction()]).toEqual(['4', '0']);
		const shifted = game('2 A0 B0 + 2 A0 B1 + 2 A1 B0 - 2 A1 B1 + 3');
		expect(mapped({ game: shifted }, '8.6568542')).toEqual([0.853553]);
		expect(game('A0 B0 + A0')).toBeNull();
		expect(game('P(0,0|0,0)')).toBeNull();
	});

	it('never proposes the claim as it stands', () => {
		for (const name of ['chsh', 'i3322', 'elegant', 'gyni'])
			for (const { scale, shift } of knownNormalisations({ family: { name } }))
				expect(scale.equals(1) && shift.n === 0n).toBe(false);
	});
});
