import { describe, expect, it } from 'vitest';
import { parseRational } from '../nonlocality/exact/rational';
import type { Relation } from './claim';
import type { Evidence } from './enclosure';
import { publicVerdict } from './public-verdict';
import {
	UNNAMED_REPRODUCTION,
	contradictionText,
	evidenceOfReproduction,
	heardReproductions,
	reproductionLabel,
	type Reproduction
} from './reproductions';
import { readStatedValue } from './stated-value';
import { deriveVerdict } from './verdict';

const r = (text: string) => parseRational(text) ?? expect.fail(`${text} is no rational`);
const LABEL = 'a reproduction by Wren Aldous (own program 2.1)';

const found = (printed: string, relation: Relation = '=') =>
	evidenceOfReproduction({ printed, relation }, LABEL);
const proved = (lower: string | null, upper: string | null): Evidence => ({
	worth: 'guaranteed',
	lower: lower === null ? null : r(lower),
	upper: upper === null ? null : r(upper),
	lowerLabel: 'an explicit quantum strategy in dimension 2',
	upperLabel: 'NPA level 2'
});
const verdictOf = (printed: string, evidence: readonly Evidence[], relation: Relation = '=') => ({
	...deriveVerdict({
		reading: readStatedValue(printed, 'as-printed'),
		relation,
		evidence,
		recomputation: { kind: 'no-solver' },
		quantity: 'Critical visibility'
	}),
	diagnosis: []
});

describe('the label of a reproduction', () => {
	it.each([
		[{ program: 'own program', programVersion: '2.1', method: 'bisection' }, LABEL],
		[
			{ program: '', programVersion: '2.1', method: 'by hand,\n two pages' },
			'a reproduction by Wren Aldous (by hand, two pages)'
		],
		[{ program: '', programVersion: '', method: '' }, 'a reproduction by Wren Aldous']
	])('%j', (how, label) => {
		expect(reproductionLabel('Wren Aldous', how)).toBe(label);
	});

	it('stays short', () => {
		const label = reproductionLabel('Wren', {
			program: '',
			programVersion: '',
			method: 'long '.repeat(60)
		});
		expect(label.length).toBeLessThan(90);
		expect(label).toMatch(/…\)$/);
	});
});

describe('a reproduction as evidence', () => {
	it('is as precise as it is printed, on the sides its relation speaks of', () => {
		const both = found('0.7071');
		expect(both).toMatchObject({ worth: 'person', lowerLabel: LABEL });
		expect(both.lower?.equals(r('0.70705'))).toBe(true);
		expect(both.upper?.equals(r('0.70715'))).toBe(true);
		expect(found('0.7071', '<=')).toMatchObject({ lower: null });
		expect(found('0.7071', '>=')).toMatchObject({ upper: null });
		expect(found('0.7071', '>=').lower?.equals(r('0.70705'))).toBe(true);
	});

	it('settles a claim no solver serves, and is named in the reason', () => {
		const agrees = verdictOf('0.7071', [found('0.70711')]);
		expect(agrees).toMatchObject({
			status: 'agreement',
			reasonCode: 'within',
			enclosure: { worth: 'person', upperLabel: LABEL }
		});
		expect(agrees.reason).toBe(
			`The critical visibility lies between 0.707105 and 0.707115, within what the printed digits allow. This rests on an accepted reproduction, not on a certificate of ours: ${LABEL}.`
		);
		const disagrees = verdictOf('0.7171', [found('0.70711')]);
		expect(disagrees).toMatchObject({ status: 'discrepancy', reasonCode: 'above-upper-bound' });
		expect(disagrees.reason).toMatch(
			/^The claimed value lies more than 0\.009 above the upper end of the accepted reproduction, so it cannot be/
		);
	});

	it('too coarse for the claim leaves it Open, and says what is known and by whom', () => {
		const open = verdictOf('0.7071', [found('0.7')]);
		expect(open).toMatchObject({ status: 'open', reasonCode: 'no-solver' });
		expect(open.reason).toContain(`So far known: it lies between 0.65 and 0.75.`);
		expect(open.reason).toContain(LABEL);
	});

	it('counts for nothing against another one that excludes it', () => {
		const open = verdictOf('0.7071', [found('0.70711'), found('0.80')]);
		expect(open).toMatchObject({ status: 'open', enclosure: null });
		expect(open.reason).toContain('Accepted reproductions contradict each other');
	});

	it('is shown without its name to the public', () => {
		for (const printed of ['0.7071', '0.7171', '0.70711234']) {
			const named = {
				...verdictOf(printed, [found('0.70711')]),
				contradicting: [{ submissionId: 's', taskNumber: 4, label: LABEL }]
			};
			const shown = publicVerdict(named);
			expect(JSON.stringify(named)).toContain('Wren');
			expect(JSON.stringify(shown)).not.toMatch(/Wren|own program|"s"/);
			expect(shown.enclosure?.upperLabel).toBe(UNNAMED_REPRODUCTION);
			expect(shown.reason).toContain('accepted reproduction');
			expect(shown).not.toHaveProperty('publicReason');
			expect(shown).toMatchObject({ status: named.status, reading: named.reading });
		}
	});
});

describe('a reproduction that a certificate excludes', () => {
	// Level 2 of I3322 is 0.25093972 (Pal and Vertesi, Phys. Rev. A 82, 022116 (2010); from memory).
	const certificate = proved('0.2508', '0.25093973');
	const made = (printed: string, state: Reproduction['state']): Reproduction => ({
		submissionId: printed,
		taskNumber: 1,
		state,
		evidence: found(printed)
	});

	it('is heard while it is excluded, and settles nothing when that is computed anew', () => {
		const all = [made('0.2509', 'accepted'), made('0.2515', 'contradicted')];
		const ids = (evidence: readonly Evidence[]) =>
			heardReproductions(all, evidence).map(({ submissionId }) => submissionId);
		expect(ids([certificate])).toEqual(['0.2509', '0.2515']);
		expect(ids([])).toEqual(['0.2509']);
		expect(ids([{ ...certificate, worth: 'numerical' }])).toEqual(['0.2509']);
	});

	it.each<[string, Relation, string]>([
		[
			'0.2515',
			'=',
			'Contradicts the certificate: it says 0.2515 (read as 0.25145 to 0.25155), but at most 0.25093973 is proved by NPA level 2.'
		],
		[
			'1/5',
			'<=',
			'Contradicts the certificate: it says at most 1/5, but at least 0.2508 is proved by an explicit quantum strategy in dimension 2.'
		]
	])('says both numbers: %s', (printed, relation, text) => {
		expect(contradictionText({ printed, relation }, [certificate])).toBe(text);
	});
});
