import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exactOfDouble, parseRational } from '../nonlocality/exact/rational';
import type { ReadingChoice, Relation } from './claim';
import { compareDigits, type DigitRun } from './digits';
import { readStatedValue } from './stated-value';
import { deriveVerdict } from './verdict';

function comparisonOf(
	printed: string,
	lower: number | string | null,
	upper: number | string | null,
	choice: ReadingChoice = 'as-printed',
	relation: Relation = '='
) {
	const end = (x: number | string | null) =>
		x === null ? null : typeof x === 'number' ? exactOfDouble(x) : parseRational(x);
	const verdict = deriveVerdict({
		reading: readStatedValue(printed, choice),
		relation,
		evidence: [
			{
				worth: 'guaranteed',
				lower: end(lower),
				upper: end(upper),
				lowerLabel: 'see-saw',
				upperLabel: 'NPA'
			}
		],
		recomputation: { kind: 'done' }
	});
	return { ...compareDigits({ printed, ...verdict }), status: verdict.status };
}

/** `0.25[15]`: what differs in brackets, what is quiet in parentheses. */
const show = (runs: readonly DigitRun[] | null) =>
	runs
		?.map(({ text, tone }) =>
			tone === 'differs' ? `[${text}]` : tone === 'quiet' ? `(${text})` : text
		)
		.join('') ?? null;

describe('compareDigits', () => {
	it.each<[string, number | string, number | string, string, string]>([
		['0.2515', '0.25085221', '0.25093973', '0.25[15]', '0.25(093973)'],
		['0.8248', '0.82842712', '0.82842713', '0.82[48]', '0.82(842713)'],
		['7.3190', '7.39103626', '7.39103627', '7.3[190]', '7.3(9103627)'],
		['2.8284', '2.82842712', '2.82842713', '2.8284', '2.8284(2713)'],
		['-2.8284', '2.82842712', '2.82842713', '[\u22122.8284]', '(2.82842713)'],
		['12.8', '2.82842712', '2.82842713', '[12.8]', '(2.82842713)'],
		['3', '2.82842712', '2.82842713', '[3]', '(2.82842713)'],
		['2', '2.82842712', '2.82842713', '[2]', '(2.82842713)'],
		['0.261', '0.2596', '0.2596', '0.26[1]', '0.2(596)']
	])('sets %s against %s to %s', (printed, lower, upper, claimed, shownUpper) => {
		const found = comparisonOf(printed, lower, upper);
		expect(show(found.claimed)).toBe(claimed);
		expect(show(found.upper)).toBe(shownUpper);
	});

	it('rounds beside the claim, and shows the known digits behind it, quiet', () => {
		const prefix = comparisonOf('2.8284', '2.82842712', '2.82842713');
		expect(prefix.rounded).toBe('2.8284');
		expect(show(prefix.value)).toBe('2.8284(271)');
		const rounded = comparisonOf('0.2515', '0.25147089', '0.25147091');
		expect(rounded.rounded).toBe('0.2515');
		expect(show(rounded.value)).toBe('(0.251470)');
		expect(show(rounded.claimed)).toBe('0.2515');
	});

	it('cuts off alike where the claim was cut off', () => {
		expect(show(comparisonOf('2.8283', '2.82842712', '2.82842713', 'truncated').claimed)).toBe(
			'2.828[3]'
		);
		expect(show(comparisonOf('2.8288', '2.82896', '2.82897', 'truncated').claimed)).toBe(
			'2.828[8]'
		);
	});

	it('shows other printed forms whole', () => {
		expect(show(comparisonOf('2*sqrt(2)', '2.8284271245', '2.8284271249').claimed)).toBe(
			'2*sqrt(2)'
		);
		expect(show(comparisonOf('2*sqrt(2)', '2.8284271245', '2.8284271249').value)).toBe(
			'2.828427124'
		);
		expect(show(comparisonOf('2*sqrt(3)', '2.8284271245', '2.8284271249').claimed)).toBe(
			'[2*sqrt(3)]'
		);
		expect(show(comparisonOf('82.84 %', '0.8284271', '0.8284272').lower)).toBe('0.8284(271)');
	});

	it('underlines nothing while a claim is Open, and stays whole with nothing to compare', () => {
		const open = comparisonOf('0.25088', '0.25085221', '0.25093973');
		expect(open.status).toBe('open');
		expect(show(open.claimed)).toBe('0.25088');
		const nothing = comparisonOf('0.25088', null, null);
		expect(nothing).toMatchObject({ lower: null, upper: null, value: null, rounded: null });
	});

	it('handles a side that is not known', () => {
		expect(show(comparisonOf('7.31', '7.39103626', null).claimed)).toBe('7.3[1]');
		expect(show(comparisonOf('7.31', '12.5', null).claimed)).toBe('[7.31]');
		expect(show(comparisonOf('9.5', null, '7.5').claimed)).toBe('[9.5]');
	});

	it('underlines exactly in a Discrepancy, and loses no character', () => {
		const printed = fc.integer({ min: -99999, max: 99999 }).map((n) => (n / 1000).toFixed(3));
		const end = fc.double({ min: -100, max: 100, noNaN: true });
		fc.assert(
			fc.property(
				printed,
				end,
				fc.double({ min: 0, max: 1e-3, noNaN: true }),
				(text, low, width) => {
					const found = comparisonOf(text, low, low + width);
					const differs = found.claimed.some((run) => run.tone === 'differs');
					expect(differs).toBe(found.status === 'discrepancy');
					expect(found.claimed.map((run) => run.text).join('')).toBe(text.replace('-', '\u2212'));
					if (found.rounded !== null) expect(found.rounded).toBe(text.replace('-', '\u2212'));
				}
			)
		);
	});

	it('shows no digit of an exact value that is not a digit of it', () => {
		const printed = fc.constantFrom('0.3333', '33.3', '-0.6667', '0.999999999999', '1', '0.5(1)');
		fc.assert(
			fc.property(
				printed,
				fc.bigInt(-(10n ** 12n), 10n ** 12n),
				fc.bigInt(1n, 10n ** 12n),
				(text, n, d) => {
					const found = comparisonOf(text, `${n}/${d}`, `${n}/${d}`);
					const shown = (found.value ?? []).map((run) => run.text).join('');
					const [, sign, whole = '', behind = ''] =
						/^(\u2212?)(\d+)(?:\.(\d+))?$/.exec(shown) ?? [];
					// Long division, on integers: an independent way to the same digits.
					const size = n < 0n ? -n : n;
					expect(sign).toBe(n < 0n ? '\u2212' : '');
					expect(whole).toBe(String(size / d));
					let rest = size % d;
					for (const digit of behind) {
						expect(digit).toBe(String((rest * 10n) / d));
						rest = (rest * 10n) % d;
					}
					expect(found.goesOn).toBe(rest !== 0n);
				}
			)
		);
	});
});
