import { describe, expect, it } from 'vitest';
import { parseClaimJson } from './claim-json';
import { ProblemError } from './problem-error';

const problem = { family: { name: 'chsh' }, quantity: 'local' };

describe('parseClaimJson', () => {
	it('keeps the value as printed, and fills in what is left out', () => {
		expect(parseClaimJson({ problem, value: '2.80' })).toEqual({
			problem,
			relation: '=',
			printed: '2.80',
			reading: 'as-printed',
			method: ''
		});
		expect(parseClaimJson({ problem, value: 0.1, reading: 'truncated' })).toMatchObject({
			printed: '0.1',
			reading: 'truncated'
		});
	});

	it.each([
		[{ problem, value: '2', relation: '==' }, /^relation: must be/],
		[{ problem, value: '2', reading: 'floor' }, /^reading: must be/],
		[{ problem }, /^value: is missing/],
		[{ value: '2' }, /^problem: is missing/],
		[{ problem, value: null }, /^value: must be a text/],
		[{ problem, value: '2', verdict: 'agreement' }, /^verdict: is not known/],
		[{ problem, value: '9'.repeat(201) }, /^value: has at most 200/],
		[[], /^claim: /],
		[null, /^claim: /]
	])('refuses %j, naming the field', (json, message) => {
		expect(() => parseClaimJson(json)).toThrow(ProblemError);
		expect(() => parseClaimJson(json)).toThrow(message);
	});
});
