import { and, desc, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { parseBoundsQuery } from '../../src/lib/schemas/bounds-query';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { parseProblem } from '../../src/lib/schemas/problem';
import { audit } from '../../src/lib/server/db/schema';
import { createInProcessPool } from '../../src/lib/server/jobs/in-process-pool';
import { listBounds } from '../../src/lib/server/services/bounds/list-bounds';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { recomputeClaim } from '../../src/lib/server/services/claims/recompute-claim';
import { restoreClaim } from '../../src/lib/server/services/claims/restore-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { showInequality } from '../../src/lib/server/services/inequalities/show-inequality';
import { showPublicInequality } from '../../src/lib/server/services/inequalities/show-public-inequality';
import { showPublicReference } from '../../src/lib/server/services/references/show-public-reference';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { claimFields } from '../support/service';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const LABEL = 'a reproduction by Wren Aldous (own program 2.1)';
const claimOf = (number: number) => showClaim(world.as.observer, number);
const rowOf = async (number: number) =>
	(await listClaims(world.as.observer, parseLedgerQuery(new URLSearchParams()))).rows.find(
		(row) => row.number === number
	);

/** Submitted by a member and accepted by a maintainer. */
async function reproduced(claim: number, printed: string, over = {}) {
	const task = await world.openTask(claim);
	await submitTask(world.wren, task, foundValue(printed, over));
	const { contradicted } = await acceptSubmission(world.as.maintainer, task);
	return { task, contradicted };
}

describe('a claim that no solver serves', () => {
	it('agrees by a person’s reproduction once somebody else accepts it, labelled so', async () => {
		const claim = await world.openClaim();
		const task = await world.openTask(claim);
		await submitTask(world.wren, task, foundValue('0.70711'));
		expect((await claimOf(claim)).verdict).toMatchObject({ status: 'open', enclosure: null });
		await acceptSubmission(world.as.maintainer, task);
		const { verdict, history } = await claimOf(claim);
		expect(verdict).toMatchObject({
			status: 'agreement',
			reasonCode: 'within',
			enclosure: { worth: 'person', lower: '0.707105', upper: '0.707115', lowerLabel: LABEL }
		});
		expect(verdict.reason).toContain(
			`an accepted reproduction, not on a certificate of ours: ${LABEL}`
		);
		expect(history.map(({ text }) => text)).toEqual(['Reproduced: Agreement', 'Entered']);
		expect(await rowOf(claim)).toMatchObject({
			recomputedBy: 'reproduction by Wren Aldous',
			wantsTask: false
		});
	});

	it('disagrees by one, and those it concerns are told', async () => {
		const claim = await world.openClaim();
		await reproduced(claim, '0.70411');
		expect((await claimOf(claim)).verdict).toMatchObject({
			status: 'discrepancy',
			reasonCode: 'above-upper-bound',
			enclosure: { worth: 'person' }
		});
		expect(await world.toldTo(world.as.member)).toContain('discrepancy');
		expect((await rowOf(claim))?.wantsTask).toBe(true);
	});

	it('hears what a one-sided value says, and no more', async () => {
		const claim = await world.openClaim({ relation: '<=', printed: '0.71' });
		await reproduced(claim, '0.7', { relation: '>=' });
		expect((await claimOf(claim)).verdict).toMatchObject({
			status: 'open',
			reasonCode: 'no-solver',
			enclosure: { lower: '0.65', upper: null }
		});
		await reproduced(claim, '<= 0.708');
		expect((await claimOf(claim)).verdict).toMatchObject({ status: 'agreement' });
	});

	it('stays Open when two reproductions exclude each other', async () => {
		const claim = await world.openClaim();
		await reproduced(claim, '0.70711');
		await reproduced(claim, '0.8');
		const { verdict } = await claimOf(claim);
		expect(verdict.status).toBe('open');
		expect(verdict.reason).toContain('Accepted reproductions contradict each other');
	});

	it('keeps it through edits of value and note, and loses it when it is about something else', async () => {
		const claim = await world.openClaim();
		await reproduced(claim, '0.70711');
		const { input } = await claimOf(claim);
		await editClaim(world.as.member, claim, 1, { ...input, printed: '0.7172', note: 'mended' });
		expect((await claimOf(claim)).verdict.status).toBe('discrepancy');
		const other = { ...input, described: 'three qubits' };
		await editClaim(world.as.member, claim, 2, other);
		expect((await claimOf(claim)).verdict).toMatchObject({ status: 'open', enclosure: null });
		await editClaim(world.as.member, claim, 3, { ...other, described: input.described });
		expect((await claimOf(claim)).verdict.status).toBe('agreement');
	});
});

describe('a reproduction that contradicts a certificate', () => {
	const enter = async (printed: string) =>
		(await enterClaim(world.as.member, claimFields({ printed }))).number;

	it('is shown so when it is accepted, and its task is the submitter’s again', async () => {
		const claim = await enter('2.8284');
		await world.recompute();
		const { task, contradicted } = await reproduced(claim, '2.9');
		expect(contradicted).toBe(true);
		const { verdict } = await claimOf(claim);
		// The certificate decides alone: 2 sqrt 2 (Cirel'son, Lett. Math. Phys. 4, 93 (1980)).
		expect(verdict).toMatchObject({
			status: 'agreement',
			enclosure: { worth: 'guaranteed' },
			contradicting: [{ taskNumber: task, label: LABEL }]
		});
		expect(verdict.reason).toContain('A reproduction by a person contradicts the certificate.');
		const view = await showTask(world.wren, task);
		expect(view).toMatchObject({ state: 'returned', assignee: { name: 'Wren Aldous' } });
		expect(view.submissions[0]).toMatchObject({ state: 'contradicted' });
		expect(view.submissions[0]?.decision).toMatch(
			/^Contradicts the certificate: it says 2\.9 \(read as 2\.85 to 2\.95\), but at most 2\.828427\d* is proved by NPA level .+\.$/
		);
		expect(view.reason).toBe(view.submissions[0]?.decision);
		expect(await world.toldTo(world.wren)).toEqual(['task-returned']);
		expect(await world.actions(view.id)).toEqual([
			'task.opened',
			'task.submitted',
			'task.accepted',
			'task.reopened'
		]);
		await submitTask(world.wren, task, foundValue('2.82843'));
		expect(await acceptSubmission(world.as.maintainer, task)).toEqual({ contradicted: false });
		expect((await showTask(world.wren, task)).state).toBe('accepted');
	});

	it('found out later is reopened by the product, in the transaction of the verdict', async () => {
		const claim = await enter('2.9');
		const { task } = await reproduced(claim, '2.9');
		expect((await claimOf(claim)).verdict).toMatchObject({
			status: 'agreement',
			enclosure: { worth: 'person' }
		});
		await world.recompute();
		const { verdict } = await claimOf(claim);
		expect(verdict).toMatchObject({
			status: 'discrepancy',
			reasonCode: 'above-upper-bound',
			enclosure: { worth: 'guaranteed' },
			contradicting: [{ taskNumber: task }]
		});
		const view = await showTask(world.wren, task);
		expect(view.state).toBe('returned');
		const [reopened] = await world.db.read
			.select()
			.from(audit)
			.where(and(eq(audit.entityId, view.id), eq(audit.action, 'task.reopened')))
			.orderBy(desc(audit.at));
		expect(reopened).toMatchObject({
			actorId: null,
			before: { state: 'accepted' },
			after: { state: 'returned', reason: view.reason }
		});
		expect(await world.toldTo(world.wren)).toEqual(['task-accepted', 'task-returned']);
		// While it is computed once more, what was contradicted settles nothing.
		await recomputeClaim(world.as.member, claim);
		expect((await claimOf(claim)).verdict.enclosure?.worth).not.toBe('person');
	});

	it('found out while the claim is withdrawn is reopened once it is restored', async () => {
		const claim = await enter('2.9');
		const { task } = await reproduced(claim, '2.9');
		await withdrawClaim(world.as.member, claim);
		await world.recompute();
		expect((await showTask(world.wren, task)).state).toBe('accepted');
		await restoreClaim(world.as.member, claim);
		expect((await showTask(world.wren, task)).state).toBe('returned');
	});
});

describe('a certificate that a person hands in', () => {
	const certified = async () => {
		const problem = parseProblem({ family: { name: 'chsh' }, quantity: 'npa', level: 1 });
		const { result } = await createInProcessPool().solve(problem);
		return JSON.stringify(result);
	};

	it('counts like the machine’s as soon as the check accepts it, whatever is decided', async () => {
		const claim = (await enterClaim(world.as.member, claimFields({ printed: '2.9' }))).number;
		const task = await world.openTask(claim);
		await submitTask(world.wren, task, { kind: 'certificate', certificate: await certified() });
		const { verdict } = await claimOf(claim);
		expect(verdict).toMatchObject({
			status: 'discrepancy',
			reasonCode: 'above-upper-bound',
			enclosure: { worth: 'guaranteed', lower: null }
		});
		expect(Number(verdict.enclosure?.upper)).toBeCloseTo(2 * Math.SQRT2, 6);
		const view = await showTask(world.as.maintainer, task);
		expect(view.submissions[0]?.check).toMatchObject({ accepted: true, label: 'NPA level 1' });
		expect(Number(view.submissions[0]?.check?.upper)).toBeGreaterThanOrEqual(2 * Math.SQRT2);
		await returnSubmission(world.as.maintainer, task, 'A lower side too, please.');
		expect((await claimOf(claim)).verdict.status).toBe('discrepancy');
	});

	it('proves nothing when the check refuses it, and says why', async () => {
		const claim = (await enterClaim(world.as.member, claimFields({ printed: '2.9' }))).number;
		const task = await world.openTask(claim);
		const result: { certificate: { multiplier: number[] } } = JSON.parse(await certified());
		// No positive multiplier has a negative entry on its diagonal.
		result.certificate.multiplier[0] = -1;
		await submitTask(world.wren, task, {
			kind: 'certificate',
			certificate: JSON.stringify(result)
		});
		const [submission] = (await showTask(world.as.observer, task)).submissions;
		expect(submission?.check).toMatchObject({ accepted: false, upper: null });
		expect(submission?.check?.note).toMatch(/./);
		const { verdict } = await claimOf(claim);
		expect(verdict).toMatchObject({ status: 'open', enclosure: null });
	});

	it('is refused where it is no result, with the place', async () => {
		const claim = (await enterClaim(world.as.member, claimFields())).number;
		const task = await world.openTask(claim);
		await expect(
			submitTask(world.wren, task, { kind: 'certificate', certificate: '{"format": ' })
		).rejects.toMatchObject({ code: 'invalid', issues: [{ field: 'certificate' }] });
		expect((await showTask(world.wren, task)).state).toBe('open');
	});
});

describe('the public', () => {
	it('reads that a person reproduced a claim, and never who', async () => {
		const { number, id } = await enterClaim(
			world.as.member,
			claimFields({ quantity: 'other', printed: '2.5', relation: '<=' })
		);
		const { task } = await reproduced(number, '2.41');
		await publishClaim(world.as.maintainer, number);
		const shown = await showPublicClaim(world.anonymous, id);
		expect(shown.verdict).toMatchObject({
			status: 'agreement',
			enclosure: { worth: 'person', upperLabel: 'a person’s reproduction' }
		});
		expect(shown.verdict.reason).toContain('accepted reproduction');
		expect(shown.history.map(({ text }) => text)).toContain('Reproduced: Agreement');
		const group = await claimOf(number);
		const inequality = await showPublicInequality(
			world.anonymous,
			group.subject.inequalityId ?? ''
		);
		const paper = await showPublicReference(world.anonymous, group.reference.id);
		const bounds = await listBounds(world.anonymous, parseBoundsQuery(new URLSearchParams()));
		expect(inequality.claimRows[0]).toMatchObject({
			recomputedBy: 'a person’s reproduction',
			task: null,
			wantsTask: false
		});
		await world.openTask(number);
		const { submissions } = await showTask(world.wren, task);
		const secrets = new RegExp(`Wren|Aldous|own program|${submissions[0]?.id ?? 'none'}`);
		for (const seen of [
			shown,
			inequality,
			paper,
			bounds,
			await showPublicInequality(world.anonymous, inequality.id)
		]) {
			expect(JSON.stringify(seen)).not.toMatch(secrets);
			expect(JSON.stringify(seen)).not.toContain('"dueOn"');
		}
		expect(JSON.stringify(group)).toMatch(/Wren Aldous \(own program 2\.1\)/);
		const own = await showInequality(world.as.observer, inequality.id);
		expect(own.claimRows[0]).toMatchObject({ recomputedBy: 'reproduction by Wren Aldous' });
		expect(own.claimRows[0]?.task).not.toBeNull();
	});

	it('is not told which reproduction a certificate excludes', async () => {
		const { number, id } = await enterClaim(world.as.member, claimFields());
		await world.recompute();
		await reproduced(number, '2.9');
		await publishClaim(world.as.maintainer, number);
		const shown = await showPublicClaim(world.anonymous, id);
		expect(shown.verdict).not.toHaveProperty('contradicting');
		expect(JSON.stringify(shown)).not.toMatch(/Wren|own program/);
	});
});
