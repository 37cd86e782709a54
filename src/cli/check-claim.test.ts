import { spawn } from 'node:child_process';
import { text } from 'node:stream/consumers';
import { describe, it } from 'vitest';

/** Runs the command as `npm run check-claim` does, on standard input. */
async function checkClaim(claim: unknown) {
	const run = spawn(process.execPath, ['--import', 'tsx', 'src/cli/check-claim.ts', '-']);
	const ended = new Promise<number | null>((resolve) => run.on('close', resolve));
	run.stdin.end(typeof claim === 'string' ? claim : JSON.stringify(claim));
	const [out, err, code] = await Promise.all([text(run.stdout), text(run.stderr), ended]);
	return { code, out, err };
}

const CHSH = { family: { name: 'chsh' }, quantity: 'local' };

describe.concurrent('check-claim', { timeout: 120_000 }, () => {
	it('prints the verdict in the problem format', async ({ expect }) => {
		const { code, out } = await checkClaim({ problem: CHSH, relation: '=', value: '4' });
		expect(code).toBe(0);
		expect(JSON.parse(out)).toMatchObject({
			status: 'discrepancy',
			reading: { printed: '4', low: 4, high: 4 },
			enclosure: { lower: 2, upper: 2, exact: '2' },
			diagnosis: [{ kind: 'other-quantity', quantity: 'no-signalling', value: '4' }],
			result: { status: 'done', quantity: 'local', certificate: { kind: 'deterministic-strategy' } }
		});
	});

	it('takes the relation that stands before the value, and refuses another one', async ({
		expect
	}) => {
		const found = await checkClaim({ problem: CHSH, value: '\\lesssim 3.0' });
		expect(JSON.parse(found.out)).toMatchObject({ status: 'agreement', reading: { high: 3.05 } });
		const refused = await checkClaim({ problem: CHSH, relation: '<=', value: '> 3' });
		expect(refused).toMatchObject({ code: 2, out: '' });
		expect(refused.err).toMatch(/^value \(at position 0\): .*another sign/);
	});

	it('keeps a claim on a quantity without solver Open', async ({ expect }) => {
		const problem = { ...CHSH, quantity: 'visibility' };
		const { code, out } = await checkClaim({ problem, value: '0.7071' });
		expect(code).toBe(4);
		expect(JSON.parse(out)).toMatchObject({ status: 'open', reasonCode: 'no-solver' });
	});

	it('names the field at fault and ends with exit code 2', async ({ expect }) => {
		const found = await checkClaim({ problem: CHSH, value: 'NaN' });
		expect(found).toMatchObject({ code: 2, out: '' });
		expect(found.err).toMatch(/^value \(at position 0\): .*finite/);
	});

	it('says which limit a problem is past and ends with exit code 3', async ({ expect }) => {
		const problem = { ...CHSH, family: { name: 'mermin', n: 40 } };
		const found = await checkClaim({ problem, value: '2' });
		expect(found).toMatchObject({ code: 3, out: '' });
		expect(found.err).toMatch(/3 to 6 for mermin, not 40/);
	});
});
