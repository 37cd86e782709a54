import { afterEach, beforeEach, expect, it } from 'vitest';
import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { solved } from '../support/certificates';
import { bibtexOf, claimFields } from '../support/service';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

/**
 * Guess your neighbour's input for three parties: its local maximum is 1/4 (Almeida and others,
 * Phys. Rev. Lett. 104, 230404, 2010). Level 1 has no moments of three parties together, so that
 * nothing of ours recomputes a claim on it; a strategy bounds it from below all the same.
 */
const GYNI = { family: { name: 'gyni', n: 3 }, quantity: 'local' };

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

let papers = 500;
async function claimOf(over: Partial<ClaimInput>): Promise<number> {
	const { number } = await enterClaim(
		world.as.member,
		claimFields({
			family: 'gyni',
			familyParameter: '3',
			quantity: 'npa',
			level: '1',
			bibtex: bibtexOf(++papers),
			...over
		})
	);
	return number;
}
const verdictOf = async (claim: number) => (await showClaim(world.as.observer, claim)).verdict;

async function handIn(claim: number, input: object): Promise<number> {
	const task = await world.openTask(claim);
	await submitTask(world.wren, task, input);
	return task;
}

it('a certificate settles a claim that no run of ours can start for', async () => {
	const certificate = await solved(GYNI);
	const wrong = await claimOf({ printed: '0.20' });
	const right = await claimOf({ relation: '>=', printed: '0.24' });
	const undecided = await claimOf({ printed: '0.90' });
	expect(await verdictOf(wrong)).toMatchObject({ status: 'open', reasonCode: 'no-solver' });
	for (const claim of [wrong, right, undecided]) {
		await handIn(claim, { kind: 'certificate', certificate });
	}
	expect(await verdictOf(wrong)).toMatchObject({
		status: 'discrepancy',
		enclosure: { worth: 'guaranteed', lower: '0.25', upper: null }
	});
	expect(await verdictOf(right)).toMatchObject({ status: 'agreement' });
	const open = await verdictOf(undecided);
	expect(open).toMatchObject({ status: 'open', reasonCode: 'no-solver' });
	expect(open.reason).toContain('So far known: it is at least 0.25');
});

it('and contradicts a person’s value there, whose task is reopened', async () => {
	const claim = await claimOf({ printed: '0.20' });
	const task = await handIn(claim, foundValue('0.20'));
	expect(await acceptSubmission(world.as.maintainer, task)).toEqual({ contradicted: false });
	expect(await verdictOf(claim)).toMatchObject({
		status: 'agreement',
		enclosure: { worth: 'person' }
	});
	await handIn(claim, { kind: 'certificate', certificate: await solved(GYNI) });
	expect(await verdictOf(claim)).toMatchObject({
		status: 'discrepancy',
		enclosure: { worth: 'guaranteed' },
		contradicting: [{ taskNumber: task }]
	});
	expect((await showTask(world.wren, task)).state).toBe('returned');
});

it('a quantity without any solver keeps to people', async () => {
	const claim = await claimOf({ quantity: 'guessing', printed: '0.20' });
	await handIn(claim, { kind: 'certificate', certificate: await solved(GYNI) });
	expect(await verdictOf(claim)).toMatchObject({ status: 'open', enclosure: null });
	const task = await handIn(claim, foundValue('0.20'));
	await acceptSubmission(world.as.maintainer, task);
	expect(await verdictOf(claim)).toMatchObject({ enclosure: { worth: 'person' } });
});
