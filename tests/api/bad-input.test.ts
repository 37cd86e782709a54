import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { claimInput, CLAIM_LIMITS, type ClaimInput } from '../../src/lib/schemas/claim-input';
import { ServiceError } from '../../src/lib/server/errors';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { readClaim } from '../../src/lib/server/services/readings/read-claim';
import { showReference } from '../../src/lib/server/services/references/show-reference';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeAll(async () => {
	world = await openServiceWorld();
});
afterAll(() => world.close());

async function refused(fields: Partial<ClaimInput>): Promise<ServiceError> {
	const outcome = await enterClaim(world.as.member, claimFields(fields)).catch((e: unknown) => e);
	if (!(outcome instanceof ServiceError)) throw new Error('was entered');
	expect(outcome.code).toBe('invalid');
	return outcome;
}

async function issueOf(fields: Partial<ClaimInput>) {
	const { issues } = await refused(fields);
	expect(issues).toHaveLength(1);
	return issues[0];
}

const expression = (text: string, more: Partial<ClaimInput> = {}): Partial<ClaimInput> => ({
	subjectKind: 'expression',
	expression: text,
	...more
});

describe('is refused with its place and what to do', () => {
	it('an expression that can’t be read', async () => {
		const issue = await issueOf(expression('A0 B0 + + ? B1'));
		expect(issue).toMatchObject({ field: 'expression', position: expect.any(Number) });
		expect(issue?.position).toBeGreaterThan(5);
	});

	it('an index outside the outputs given', async () => {
		const issue = await issueOf(
			expression('A0 B0 + A2 B1', { outputs: '2 2 / 2 2', indexBase: '0' })
		);
		expect(issue).toMatchObject({ field: 'expression', position: 8 });
		expect(issue?.message).toContain('A has no input 2');
	});

	it('an index 0 where indices start at 1', async () => {
		const issue = await issueOf(expression('A0 B1', { indexBase: '1' }));
		expect(issue?.message).toContain('If they start at 0, choose that.');
	});

	it('a scenario past the model’s limits', async () => {
		const issue = await issueOf(expression('A100 B0 + A0 B1'));
		expect(issue?.message).toMatch(/at most \d+ inputs/);
	});

	it.each(['NaN A0 B0', 'Infinity A0 B0', '1/0 A0 B0', '1e999 A0 B0', '9^9^9^9 A0 B0'])(
		'the coefficient of %s',
		async (text) => {
			const issue = await issueOf(expression(text));
			expect(issue?.field).toBe('expression');
		}
	);

	it.each(['two', 'NaN', '2,8284', '2.8.2', '1e9999', '__proto__', 'sqrt(', '<script>'])(
		'the value %s',
		async (printed) => {
			const issue = await issueOf({ printed });
			expect(issue).toMatchObject({ field: 'printed', position: expect.any(Number) });
		}
	);

	it('an empty value or expression, which has no place to point at', async () => {
		const { issues } = await refused(expression(' ', { printed: '' }));
		expect(issues).toEqual([
			{ field: 'expression', message: 'Write the inequality.' },
			{ field: 'printed', message: 'Give the value as printed.' }
		]);
	});

	it('BibTeX with an unbalanced brace', async () => {
		const issue = await issueOf({
			bibtex: '@misc{x,\n title={a},\n author={B {C},\n year=2000\n}'
		});
		expect(issue).toMatchObject({
			field: 'bibtex',
			message: 'Line 3: this brace is never closed.'
		});
	});

	it('two entries where one is asked', async () => {
		const issue = await issueOf({ bibtex: `${bibtexOf(1)}\n${bibtexOf(2)}` });
		expect(issue).toMatchObject({ field: 'bibtex' });
		expect(issue?.message).toContain('a second entry starts here');
	});

	it('a table whose rows differ in length', async () => {
		const issue = await issueOf({ subjectKind: 'collins-gisin', table: '0 -1 0\n-1 1\n0 1 -1' });
		expect(issue).toMatchObject({ field: 'table' });
	});

	it('a constant', async () => {
		const issue = await issueOf(expression('A0 B0 - A0 B0 + 3'));
		expect(issue?.message).toContain('same number for every behaviour');
	});

	it('a family without its parameter, or past its limit', async () => {
		expect((await issueOf({ family: 'cglmp' }))?.message).toContain('integer from 2 to 12');
		expect((await issueOf({ family: 'cglmp', familyParameter: '1000' }))?.message).toContain('12');
		expect((await issueOf({ family: 'nonesuch' }))?.field).toBe('family');
	});

	it('a level that is none', async () => {
		expect((await issueOf({ quantity: 'npa', level: '99' }))?.field).toBe('level');
		expect((await issueOf({ quantity: 'quantum-dimension', dimension: 'two' }))?.field).toBe(
			'dimension'
		);
	});

	it('an inequality’s quantity of something described', async () => {
		const issue = await issueOf({ subjectKind: 'described', described: 'a box' });
		expect(issue?.field).toBe('subjectKind');
	});

	it('a claim with several things wrong, all of them named', async () => {
		const { issues } = await refused(
			expression('A0 B0 +', { printed: 'x', bibtex: '', locator: ' ', quantity: 'npa' })
		);
		expect(issues.map(({ field }) => field).sort()).toEqual([
			'bibtex',
			'expression',
			'level',
			'locator',
			'printed'
		]);
	});
});

const TEXT_FIELDS = Object.entries(claimInput.shape).flatMap(([name]) =>
	name in
	{
		visibility: 1,
		sense: 1,
		relation: 1,
		reading: 1,
		paper: 1,
		quantity: 1,
		subjectKind: 1,
		indexBase: 1,
		nonNegative: 1
	}
		? []
		: [name]
);

describe('a paste', () => {
	it.each(TEXT_FIELDS)('of 200 kB into %s is refused at once', async (field) => {
		const start = performance.now();
		const outcome = await refused({ [field]: 'A0 B0 + '.repeat(25_000) });
		expect(performance.now() - start).toBeLessThan(500);
		expect(outcome.issues.map((issue) => issue.field)).toContain(field);
		expect(outcome.issues[0]?.message).toMatch(/^At most [\d,]+ characters/);
	});

	it('as long as the limit allows is answered quickly', async () => {
		const start = performance.now();
		await refused(expression('(A0+'.repeat(CLAIM_LIMITS.expression / 4)));
		await refused(expression('A0 B0+'.repeat(600) + 'A0 B0 ?'));
		await refused({ subjectKind: 'correlators', table: '1 '.repeat(CLAIM_LIMITS.table / 2) });
		expect(performance.now() - start).toBeLessThan(2_000);
	});
});

describe('markup', () => {
	const SCRIPT = '<script>alert(1)</script>';

	it.each(TEXT_FIELDS)('in %s is refused or kept as plain text', async (field) => {
		const reading = await readClaim(world.as.member, claimFields({ [field]: SCRIPT }));
		expect(reading.formulaHtml ?? '').not.toContain('<script');
		const outcome = await enterClaim(world.as.member, claimFields({ [field]: SCRIPT })).catch(
			(e: unknown) => e
		);
		if (outcome instanceof ServiceError) expect(outcome.code).toBe('invalid');
		else {
			const { number } = outcome as { number: number };
			const claim = await showClaim(world.as.member, number);
			expect(claim.subject.html ?? '').not.toContain('<script');
			await withdrawClaim(world.as.member, number);
		}
	});

	it('in a reference stays text', async () => {
		const bibtex = `@misc{x, title={${SCRIPT}}, author={<b>B</b>, C}, year={2001}, doi={10.5555/x}}`;
		const { number } = await enterClaim(world.as.member, claimFields({ bibtex }));
		const { reference } = await showClaim(world.as.member, number);
		expect(reference.title).toContain('alert(1)');
		expect(JSON.parse(reference.cslJson)).toHaveLength(1);
	});
});

describe('what is not one’s own', () => {
	it('is not there for another group', async () => {
		const { number } = await enterClaim(world.as.member, claimFields());
		const claim = await showClaim(world.as.member, number);
		for (const attempt of [
			() => showClaim(world.outsider, number),
			() => publishClaim(world.outsider, number),
			() => withdrawClaim(world.outsider, number),
			() => showReference(world.outsider, claim.reference.id)
		]) {
			await expect(attempt()).rejects.toMatchObject({ code: 'not-found' });
		}
		const theirs = claimFields({ paper: 'known', referenceId: claim.reference.id });
		await expect(enterClaim(world.outsider, theirs)).rejects.toMatchObject({
			issues: [{ field: 'referenceId' }]
		});
	});

	it('a member does not publish', async () => {
		const { number } = await enterClaim(world.as.member, claimFields());
		await expect(publishClaim(world.as.member, number)).rejects.toMatchObject({
			code: 'forbidden'
		});
		await expect(
			enterClaim(world.as.member, claimFields({ visibility: 'public' }))
		).rejects.toMatchObject({ code: 'forbidden' });
	});

	it('an observer enters nothing', async () => {
		await expect(enterClaim(world.as.observer, claimFields())).rejects.toMatchObject({
			code: 'forbidden'
		});
	});

	it('a key from outside changes no prototype', async () => {
		const fields: unknown = JSON.parse('{"__proto__": {"polluted": 1}, "printed": "x"}');
		await enterClaim(world.as.member, fields as Partial<ClaimInput>).catch(() => undefined);
		expect(Reflect.get({}, 'polluted')).toBeUndefined();
	});
});
