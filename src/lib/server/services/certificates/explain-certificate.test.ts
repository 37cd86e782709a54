import { describe, expect, it } from 'vitest';
import { solve } from '../../../nonlocality/index';
import { parseProblem } from '../../../schemas/problem';
import { explainCertificate } from './explain-certificate';

const control = { now: () => performance.now(), shouldStop: () => false, report: () => undefined };

describe('a certificate in words', () => {
	it.each([
		[{ quantity: 'local' }, 'deterministic-strategy'],
		[{ quantity: 'no-signalling' }, 'linear-programme'],
		[{ quantity: 'npa', level: 1, nonNegative: true }, /^npa-/],
		[{ quantity: 'npa', level: 1 }, 'npa-exact'],
		[
			{ quantity: 'npa', level: 1, family: { name: 'tilted-chsh', alpha: 'sqrt(2)/2' } },
			'npa-dual'
		],
		[
			{
				quantity: 'local',
				constraints: [{ expression: 'A0', relation: '<=', value: 0 }]
			},
			'local-mixture'
		],
		[{ quantity: 'hybrid', model: 'no-signalling', family: { name: 'mermin', n: 3 } }, 'hybrid'],
		[{ quantity: 'facet' }, 'facet'],
		[{ quantity: 'see-saw', dimension: 2 }, 'quantum-strategy'],
		[{ quantity: 'quantum', seconds: 5 }, 'enclosure']
	])('names every field of what solves %j', async (asked, kind) => {
		const result = await solve(parseProblem({ family: { name: 'chsh' }, ...asked }), control);
		if (result.status !== 'done' || !result.certificate) throw new Error('no certificate');
		const explained = explainCertificate(result.certificate);
		expect(explained.kind).toMatch(kind);
		expect(explained.proof.length).toBeGreaterThan(0);
		const words = JSON.stringify([
			explained.fields,
			...explained.parts.map(({ fields }) => fields)
		]);
		const named = Object.keys(result.certificate).filter((field) => field !== 'kind');
		for (const field of named) expect(words, field).toContain(field);
		expect(words).not.toMatch(/undefined|NaN/);
	});
});
