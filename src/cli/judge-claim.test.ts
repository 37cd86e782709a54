import { describe, expect, it } from 'vitest';
import { readStatedValue } from '../lib/ledger/stated-value';
import type { Control } from '../lib/nonlocality';
import { parseClaimJson } from '../lib/schemas/claim-json';
import { parseProblem } from '../lib/schemas/problem';
import { judgeClaim } from './judge-claim';
import { knownFamily } from './known-family';

const CONTROL: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};

async function judged(json: object) {
	const claim = parseClaimJson(json);
	const reading = readStatedValue(claim.printed, claim.reading);
	return judgeClaim(claim, reading, parseProblem(claim.problem), CONTROL);
}

const kindsOf = (found: Awaited<ReturnType<typeof judged>>) =>
	found.verdict.diagnosis.map((d) => [d.kind, d.value]);

describe('judgeClaim', { timeout: 120_000 }, () => {
	it("agrees with Cirel'son's bound of CHSH, 2 sqrt 2", async () => {
		const problem = { family: { name: 'chsh' }, quantity: 'quantum' };
		const { verdict, others } = await judged({ problem, value: '2*sqrt(2)' });
		expect(verdict).toMatchObject({ status: 'agreement', reasonCode: 'within', diagnosis: [] });
		expect(others).toEqual([]);
	});

	it('proves the local maximum of CHSH', async () => {
		const problem = { family: { name: 'chsh' }, quantity: 'local' };
		const { verdict } = await judged({ problem, value: '2' });
		expect(verdict).toMatchObject({ status: 'agreement', reasonCode: 'proved' });
	});

	// CGLMP d=3 at level 1 is published as 3.1547, which needs P >= 0; the bare matrix gives 4.0
	// (Navascues, Pironio, Acin, New J. Phys. 10, 073013 (2008); from memory).
	it('tells level 1 with non-negative probabilities from level 1 without', async () => {
		const problem = { family: { name: 'cglmp', d: 3 }, quantity: 'npa', level: 1 };
		const found = await judged({ problem, value: '3.1547', method: 'NPA level 1' });
		expect(found.verdict.status).toBe('discrepancy');
		expect(found.verdict.diagnosis[0]).toMatchObject({
			kind: 'other-quantity',
			fields: { level: 1, nonNegative: true },
			value: '3.1547'
		});
	});

	it('recognises CH by its terms, and its claim in the normalisation of CHSH', async () => {
		const problem = {
			expression: 'P(0,0|0,0) + P(0,0|0,1) + P(0,0|1,0) - P(0,0|1,1) - P_A(0|0) - P_B(0|0)',
			quantity: 'npa',
			level: 1
		};
		expect(knownFamily(parseProblem(problem))).toMatchObject({ family: { name: 'chsh' } });
		const found = await judged({ problem, value: '2.8284' });
		expect(kindsOf(found)).toEqual([['other-normalisation', '2.8284']]);
		expect(found.verdict.diagnosis[0]).toMatchObject({ scale: '4', shift: '2' });
	});

	it('finds the other index base where it changes the value', async () => {
		// P(a below 2) is 1 for the input with two outputs, and can be 0 for the one with three.
		const problem = {
			expression: 'P(0,0|1,1) + P(1,0|1,1) + P(0,1|1,1) + P(1,1|1,1)',
			outputs: [
				[2, 3],
				[2, 2]
			],
			indexBase: 0,
			quantity: 'local',
			sense: 'min'
		};
		const found = await judged({ problem, value: '1' });
		expect(found.verdict).toMatchObject({ status: 'discrepancy', enclosure: { exact: '0' } });
		expect(kindsOf(found)).toContainEqual(['index-base', '1']);
	});
});
