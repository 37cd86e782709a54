import { describe, expect, it } from 'vitest';
import { problemOn, solved } from '../../../../tests/factories/solver-problem';
import { parseCoefficient } from '../exact/expression';
import { familyFunctional, familyInfo, type FamilySpec } from './families';

/** The value of a formula of the list, its parameter put in. */
function listed(formula: string, spec: FamilySpec): string {
	const parameter = spec.alpha ?? spec.n ?? spec.d ?? 0;
	const text = formula
		.replace(/floor\(n\/2\)/, String(Math.floor(Number(parameter) / 2)))
		.replace(/ceil\(n\/2\)/, String(Math.ceil(Number(parameter) / 2)))
		.replace(/\balpha\b|\bn\b|\bd\b/g, `(${parameter})`);
	return parseCoefficient(text).text;
}

async function exactMaximum(quantity: 'local' | 'no-signalling', spec: FamilySpec) {
	const f = familyFunctional(spec);
	const problem = quantity === 'local' ? problemOn('local', f) : problemOn('no-signalling', f);
	return (await solved(problem)).exact;
}

const MEMBERS: FamilySpec[] = [
	{ name: 'chsh' },
	...['0', '1/3', '1', '7/4', '2'].map((alpha) => ({ name: 'tilted-chsh', alpha })),
	...[2, 3, 4, 5, 8].map((n) => ({ name: 'chained', n })),
	{ name: 'i3322' },
	...[2, 3, 4, 5, 6].map((d) => ({ name: 'cglmp', d })),
	{ name: 'elegant' },
	...[3, 4, 5].map((n) => ({ name: 'mermin', n })),
	...[2, 3, 4, 5].map((n) => ({ name: 'svetlichny', n })),
	...[3, 4].map((n) => ({ name: 'gyni', n })),
	{ name: 'magic-square' }
];

describe('the values listed with the families are those that are computed', () => {
	it.each(MEMBERS)('local maximum of %j', async (spec) => {
		const { local } = familyInfo(spec.name).known;
		expect(await exactMaximum('local', spec)).toBe(listed(local ?? '', spec));
	});

	it.each(MEMBERS.filter(({ name }) => name !== 'gyni'))(
		'no-signalling maximum of %j',
		async (spec) => {
			const { noSignalling } = familyInfo(spec.name).known;
			expect(await exactMaximum('no-signalling', spec)).toBe(listed(noSignalling ?? '', spec));
		}
	);

	// Phys. Rev. Lett. 104, 230404 (2010): no formula in n.
	it.each([
		[3, '1/3'],
		[4, '1/6'],
		[5, '1/11']
	])('no-signalling maximum of guessing the neighbour among %i', async (n, value) => {
		expect(await exactMaximum('no-signalling', { name: 'gyni', n })).toBe(value);
	});

	it.each([
		[{ name: 'mermin', n: 6 }, '8'],
		[{ name: 'svetlichny', n: 6 }, '8'],
		[{ name: 'gyni', n: 5 }, '1/16'],
		[{ name: 'cglmp', d: 9 }, '2'],
		[{ name: 'chained', n: 12 }, '22']
	])('local maximum of the larger %j', async (spec, value) => {
		expect(await exactMaximum('local', spec)).toBe(value);
	});
});
