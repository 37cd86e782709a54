import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compileKernels, GENERATED } from '../support/build-kernels.mjs';

describe('the compiled kernels', () => {
	it('are what their source gives: after a change, npm run build:kernels', async () => {
		expect(await compileKernels()).toBe(readFileSync(GENERATED, 'utf8'));
	});
});
