import { describe, expect, it } from 'vitest';
import { makeVerdict } from '../../../../tests/factories/views';
import type { Verdict } from '../../ledger/verdict';
import { recomputedShown } from './recomputed-shown';

/** Bold in asterisks, then what follows it quietly. */
function shown(printed: string, verdict: Verdict): string {
	const view = recomputedShown(printed, verdict);
	if (!view) return 'nothing';
	const text = (runs: readonly { text: string; tone: string }[]) =>
		runs.map((run) => (run.tone === 'same' ? `*${run.text}*` : run.text)).join('');
	const to = view.to ? ` to ${text(view.to)}` : '';
	return `${view.sign ?? ''}${text(view.main)}${to} | ${view.after.join(' to ')}`;
}

const verdict = (
	printed: string,
	[low, high]: readonly [string, string],
	[lower, upper]: readonly [string | null, string | null],
	more: { status?: Verdict['status']; exact?: string } = {}
) =>
	makeVerdict({
		status: more.status ?? 'agreement',
		reading: { printed, low, high, exact: false, text: '' },
		enclosure: {
			lower,
			upper,
			exact: more.exact ?? null,
			worth: 'guaranteed',
			lowerLabel: '',
			upperLabel: ''
		}
	});

describe('what stands beside a claim', () => {
	it('is one figure where rounding changes no digit', () => {
		const chsh = verdict('2.8284', ['2.82835', '2.82845'], ['2.828427124', '2.828427125']);
		expect(shown('2.8284', chsh)).toBe('*2.8284*2712 | ');
	});

	it('is the rounded value, then the full one, where it does', () => {
		const cglmp = verdict('2.9149', ['2.91485', '2.91495'], ['2.914854215', '2.914854216']);
		expect(shown('2.9149', cglmp)).toBe('*2.9149* | 2.91485421');
	});

	it('never lets shared digits fewer than the claim has stand for the value', () => {
		// I3322: 0.2508753845 (Pal, Vertesi 2010); a strategy and NPA level 3 enclose it like this.
		const wide = verdict('0.2509', ['0.25085', '0.25095'], ['0.2508618', '0.2508756']);
		expect(shown('0.2509', wide)).toBe('*0.2509* | 0.250861 to 0.250876');
	});

	it('is a quiet range where a bound holds but no digits are shared', () => {
		const bound = verdict('2.8729', ['2.87285', '1e9'], ['2.87293', '2.91486']);
		expect(shown('2.8729', bound)).toBe('2.87293 to 2.91486 | ');
	});

	it('shows what is exact once', () => {
		const half = { status: 'discrepancy', exact: '1/4' } as const;
		expect(shown('0.75', verdict('0.75', ['0.745', '0.755'], ['0.25', '0.25'], half))).toBe(
			'*0.*25 | 1/4'
		);
		const twelve = { status: 'discrepancy', exact: '12' } as const;
		expect(shown('-12', verdict('-12', ['-12', '-12'], ['12', '12'], twelve))).toBe('12 | ');
		const third = verdict('1/3', ['1/3', '1/3'], ['0.3333333333333', '0.3333333333333'], {
			exact: '1/3'
		});
		const quarter = verdict('1/4', ['1/4', '1/4'], ['0.25', '0.25'], { exact: '1/4' });
		expect(shown('1/4', quarter)).toBe('*1/4* | 0.25');
		expect(shown('1/3', third)).toBe('*1/3* | 0.333333333…');
	});

	it('signs a bound with one side', () => {
		const one = verdict('0.2500', ['0.24995', '0.25005'], ['0.291283445', null], {
			status: 'discrepancy'
		});
		expect(shown('0.2500', one)).toBe('≥*0.2*91283445 | ');
	});
});
