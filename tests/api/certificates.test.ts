import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { submissions, tasks } from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { closeSolverPool, setSolverPool } from '../../src/lib/server/jobs/current-pool';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim, type ClaimRow } from '../../src/lib/server/services/claims/find-claim';
import { downloadCertificate } from '../../src/lib/server/services/submissions/download-certificate';
import { loadSubmittedFindings } from '../../src/lib/server/services/submissions/load-submitted-findings';
import { readCertificate } from '../../src/lib/server/services/submissions/read-certificate';
import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import { CHSH_STRATEGY } from '../factories/chsh-strategy';
import { CH, TSIRELSON, certify, sidesOf, solved } from '../support/certificates';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

/**
 * Published values, quoted from memory of the papers. CHSH: Tsirelson 1980, 2 sqrt 2. CH (Clauser and Horne 1974) is (CHSH - 2)/4, so
 * that its quantum maximum is (sqrt 2 - 1)/2. I3322: Pál and Vértesi 2010, 0.250875384514 from above
 * ; level 2 of the NPA hierarchy 0.250939722 (Navascués, Pironio and Acín
 * 2008 print 0.2509).
 */
const CH_MAXIMUM = (Math.SQRT2 - 1) / 2;
const I3322_UPPER = 0.2508753846;

/** I3322 with its parties exchanged, the second's outputs turned round, doubled, and 3 added. */
const I3322_ELSEWHERE = {
	expression:
		'2 ( - 2 P_B(1|0) - P_B(1|1) - P_A(0|0) + P(0,1|0,0) + P(0,1|1,0) + P(0,1|2,0) + P(0,1|0,1)' +
		' + P(0,1|1,1) - P(0,1|2,1) + P(0,1|0,2) - P(0,1|1,2) ) + 3',
	outputs: [
		[2, 2, 2],
		[2, 2, 2]
	]
};

let world: ServiceWorld;
beforeAll(async () => {
	world = await openServiceWorld();
	setSolverPool(createInProcessPool());
});
afterAll(async () => {
	await closeSolverPool();
	world.close();
});

let papers = 0;
async function claimOf(fields: Partial<ClaimInput> = {}): Promise<ClaimRow> {
	papers++;
	const { number } = await enterClaim(
		world.as.member,
		claimFields({ bibtex: bibtexOf(papers), ...fields })
	);
	return findClaim(world.db.read, world.as.member, number);
}

const read = (claim: ClaimRow, text: string) => readCertificate(world.as.member, claim, text);

describe('a certificate of the command line', () => {
	it('of CHSH’s level 1 says what it proves, rounded outward', async () => {
		const claim = await claimOf();
		const { finding, label, accepted, note } = await read(
			claim,
			certify({ family: { name: 'chsh' }, quantity: 'npa', level: 1 })
		);
		expect(accepted).toBe(true);
		expect(label).toBe('NPA level 1');
		const { upper } = sidesOf(finding);
		expect(upper).toBeGreaterThanOrEqual(TSIRELSON);
		expect(upper).toBeLessThan(TSIRELSON + 1e-7);
		expect(note).toMatch(
			/^Proves that the bound of NPA level 1 without non-negative probabilities is at least 2\.8284271\d* and at most 2\.82842\d*, in the claim’s/
		);
		// Only the upper side of a relaxation speaks of the quantum maximum.
		expect(note).not.toContain('says nothing');
	});

	it('in the form of Clauser and Horne meets a claim on CHSH', async () => {
		const claim = await claimOf();
		const upper = await read(claim, certify({ ...CH, quantity: 'npa', level: 1 }));
		expect(sidesOf(upper.finding).upper).toBeGreaterThanOrEqual(TSIRELSON);
		expect(sidesOf(upper.finding).upper).toBeLessThan(TSIRELSON + 1e-6);
		expect(upper.finding.result.problem.terms).toEqual(
			(await read(claim, await solved({ family: { name: 'chsh' }, quantity: 'local' }))).finding
				.result.problem.terms
		);
		const lower = await read(claim, await solved({ ...CH, quantity: 'see-saw', dimension: 2 }));
		expect(lower.label).toBe('Explicit strategy, dimension 2');
		expect(sidesOf(lower.finding)).toMatchObject({ upper: null });
		expect(sidesOf(lower.finding).lower).toBeLessThanOrEqual(TSIRELSON);
		expect(sidesOf(lower.finding).lower).toBeGreaterThan(TSIRELSON - 1e-6);
		// CHSH = 4 CH + 2, exactly where it is exact: local 0 and 2, no-signalling 1/2 and 4.
		const local = await read(claim, await solved({ ...CH, quantity: 'local' }));
		expect(sidesOf(local.finding)).toMatchObject({ lower: 2, upper: 2, exact: '2' });
		const box = await read(claim, await solved({ ...CH, quantity: 'no-signalling' }));
		expect(sidesOf(box.finding).exact).toBe('4');
	});

	it('of CHSH meets a claim in the form of Clauser and Horne', async () => {
		const claim = await claimOf({
			subjectKind: 'collins-gisin',
			table: '0 -1 0\n-1 1 1\n0 1 -1',
			printed: '0.2071'
		});
		const { note } = await read(
			claim,
			await solved({ family: { name: 'chsh' }, quantity: 'quantum', seconds: 10 })
		);
		const [, lower, upper] = /at least ([\d.]+) and at most ([\d.]+), in/.exec(note) ?? [];
		expect(Number(lower)).toBeLessThanOrEqual(CH_MAXIMUM);
		expect(Number(upper)).toBeGreaterThanOrEqual(CH_MAXIMUM);
		expect(Number(upper) - Number(lower)).toBeLessThan(1e-6);
	});

	it('of I3322, relabelled, doubled and shifted, bounds the claimed one', async () => {
		const claim = await claimOf({ family: 'i3322', printed: '0.2509' });
		const { finding, accepted } = await read(
			claim,
			certify({ ...I3322_ELSEWHERE, quantity: 'npa', level: 2 })
		);
		expect(accepted).toBe(true);
		const { upper } = sidesOf(finding);
		expect(upper).toBeGreaterThan(I3322_UPPER);
		expect(upper).toBeCloseTo(0.250939722, 8);
	});

	it('that says nothing on the claimed quantity says so', async () => {
		const claim = await claimOf({ quantity: 'local', printed: '2' });
		const { accepted, note } = await read(
			claim,
			await solved({ family: { name: 'chsh' }, quantity: 'see-saw', dimension: 2 })
		);
		expect(accepted).toBe(true);
		expect(note).toContain('it says nothing on the claimed quantity (Local maximum)');
	});
});

describe('a strategy of one’s own', () => {
	const { state, measurements } = CHSH_STRATEGY;
	const box = { family: 'quantum', state, measurements };

	it('evaluated by the command line bounds the maximum from below', async () => {
		const claim = await claimOf();
		const text = await solved({ family: { name: 'chsh' }, quantity: 'value', box });
		const { finding, label, accepted } = await read(claim, text);
		expect(accepted).toBe(true);
		expect(label).toBe('Explicit strategy, dimension 2');
		expect(finding.result.problem).toMatchObject({ quantity: 'see-saw', dimension: [2, 2] });
		const { lower, upper } = sidesOf(finding);
		expect(upper).toBeNull();
		expect(lower).toBeLessThanOrEqual(TSIRELSON);
		expect(lower).toBeGreaterThan(TSIRELSON - 1e-9);
	});

	it('as a box of fractions bounds what a box of its kind reaches', async () => {
		const claim = await claimOf();
		const deterministic = {
			family: 'deterministic',
			strategy: [
				[0, 0],
				[0, 1]
			]
		};
		const chsh = { family: { name: 'chsh' }, quantity: 'value' };
		const local = await read(claim, await solved({ ...chsh, box: deterministic }));
		expect(local.label).toBe('Explicit box');
		expect(local.finding.result).toMatchObject({ quantity: 'local', lower: 2, upper: null });
		const uniform = await read(claim, await solved({ ...chsh, box: { family: 'uniform' } }));
		expect(uniform.finding.result).toMatchObject({ quantity: 'no-signalling', lower: 0 });
		const irrational = await read(
			claim,
			await solved({ ...chsh, box: { family: 'isotropic', d: 2, E: 'sqrt(2)/2' } })
		);
		expect(irrational).toMatchObject({ accepted: false });
		expect(irrational.note).toContain('irrational entries');
	});
});

describe('what is refused, with a sentence', () => {
	it.each([
		['{"a": 1,\n "b" 2}', /not JSON\. .*line 2, column 6/],
		['', /The text ends where a value should be/],
		['[]', /must be an object/],
		['{"family": {"name": "chsh"}, "quantity": "local"}', /this is a problem, not yet its result/],
		['{"problem": {"quantity": "faith"}}', /can’t be read/],
		[`"${'x'.repeat(2_000_000)}"`, /more than 2 MB/]
	])('of %j', async (text, message) => {
		const claim = await claimOf();
		const error: unknown = await read(claim, text).catch((thrown: unknown) => thrown);
		expect(error).toMatchObject({ code: 'invalid', message: expect.stringMatching(message) });
		expect(error).toMatchObject({ issues: [{ field: 'certificate' }] });
	});

	it('a certificate of another inequality, or under constraints, or for a claim without one', async () => {
		const i3322 = await claimOf({ family: 'i3322', printed: '0.2509' });
		const text = await solved({ family: { name: 'chsh' }, quantity: 'local' });
		await expect(read(i3322, text)).rejects.toThrow('of another inequality than the claim');
		const chsh = await claimOf();
		const constraints = [{ expression: 'A0', relation: '=', value: 0 }];
		const bound = await solved({
			family: { name: 'chsh' },
			quantity: 'npa',
			level: 1,
			constraints
		});
		await expect(read(chsh, bound)).rejects.toThrow('under constraints');
		const described = await claimOf({
			subjectKind: 'described',
			described: 'a threshold of our own',
			quantity: 'visibility',
			printed: '0.7071'
		});
		await expect(read(described, text)).rejects.toThrow('not about an inequality');
	});

	it('an irrational functional that only looks like the claim’s', async () => {
		const expression = 'A0 + sqrt(2) A0 B0 + A0 B1 + A1 B0 - A1 B1';
		const claim = await claimOf({ subjectKind: 'expression', expression, printed: '3.5' });
		const same = await read(claim, await solved({ expression, quantity: 'local' }));
		expect(same.accepted).toBe(true);
		// Its first digits are those of sqrt(2), so that it is another functional.
		const near = await solved({
			expression: expression.replace('sqrt(2)', '1.41421356237309504880168872420969807857'),
			quantity: 'local'
		});
		await expect(read(claim, near)).rejects.toThrow(/can’t be proved|another inequality/);
	});
});

describe('what was handed in', () => {
	it('is loaded as proved while the claim is about the same, and downloads as it was', async () => {
		const { member, observer } = world.as;
		const claim = await claimOf();
		const text = await solved({ ...CH, quantity: 'npa', level: 1 });
		const { finding } = await read(claim, text);
		const refused = await read(claim, JSON.stringify({ ...JSON.parse(text), upper: 0.2 }));
		const [taskId, good, bad] = [newId(), newId(), newId()];
		const at = new Date();
		await world.db.write(async (tx) => {
			await tx.insert(tasks).values({
				...{ id: taskId, groupId: member.group.id, number: 1, claimId: claim.id },
				...{ kind: 'recompute', state: 'submitted', createdBy: member.actor.id },
				...{ createdAt: at, updatedAt: at }
			});
			for (const [id, found] of [
				[good, finding],
				[bad, refused.finding]
			] as const) {
				await tx.insert(submissions).values({
					...{ id, taskId, claimId: claim.id, quantityKey: 'x', kind: 'certificate' },
					...{ finding: found, certificate: text, submittedBy: member.actor.id, submittedAt: at }
				});
			}
		});
		const found = await loadSubmittedFindings(world.db.read, claim);
		expect(found).toEqual([
			{ id: good, taskId, by: member.actor.name, isStation: false, ...finding }
		]);
		const other = await claimOf({ family: 'i3322', printed: '0.2509' });
		const moved = { ...claim, inequalityId: other.inequalityId };
		expect(await loadSubmittedFindings(world.db.read, moved)).toEqual([]);
		expect((await downloadCertificate(observer, good)).text).toBe(text);
		await expect(downloadCertificate(world.outsider, good)).rejects.toThrow('no such certificate');
	});
});
