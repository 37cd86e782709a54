import { describe, expect, it } from 'vitest';
import { parseProblem } from '../lib/schemas/problem';
import { controlOf, solveAndCheck } from './task';

const chsh = { format: 1, family: { name: 'chsh' } };
const told = () => controlOf(new Int32Array(1), () => undefined);

describe('a solver task', () => {
	it('checks the value of a box too, which has no certificate', async () => {
		// The isotropic box wins CHSH by 4 E: Tsirelson's value at E = 1/sqrt(2), 2 at E = 1/2.
		const box = { family: 'isotropic', d: 2, E: '1/2' };
		const { result, check } = await solveAndCheck(
			parseProblem({ ...chsh, quantity: 'value', box }),
			told()
		);
		expect(result).toMatchObject({ status: 'done', certificate: null, exact: '2' });
		expect(check).toMatchObject({ checked: true, exact: '2' });
	});

	it('checks the certificate of a maximum', async () => {
		const { result, check } = await solveAndCheck(
			parseProblem({ ...chsh, quantity: 'local' }),
			told()
		);
		expect(result).toMatchObject({ certificate: { kind: 'deterministic-strategy' } });
		expect(check).toMatchObject({ checked: true, exact: '2' });
	});

	it('that is told to stop has nothing to check', async () => {
		const stop = new Int32Array([1]);
		const { result, check } = await solveAndCheck(
			parseProblem({ ...chsh, quantity: 'npa', level: 2 }),
			controlOf(stop, () => undefined)
		);
		expect(result.status).toBe('cancelled');
		expect(check).toBeNull();
	});
});
