import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addressListProblem, MOST_ADDRESSES, readAddressList } from './address-list';

const address = fc
	.tuple(fc.stringMatching(/^[a-z][a-z0-9]{0,9}$/), fc.stringMatching(/^[a-z]{2,8}$/))
	.map(([name, place]) => `${name}@${place}.example`);

describe('readAddressList', () => {
	it.each([
		['a@x.example', ['a@x.example']],
		['a@x.example, b@x.example;c@x.example\n\td@x.example e@x.example', 'abcde'],
		['A@X.Example a@x.example', ['a@x.example']],
		// The display names of RFC 5322 section 3.4.
		[
			'Wren Adeyo <wren@x.example>, "Tam Voss" <tam@x.example>',
			['wren@x.example', 'tam@x.example']
		],
		['Wren <w@x.example> Tam <t@x.example>', ['w@x.example', 't@x.example']],
		['a@x.example <b@x.example> c@x.example', 'abc']
	])('reads %j', (text, expected) => {
		const addresses =
			typeof expected === 'string' ? [...expected].map((name) => `${name}@x.example`) : expected;
		expect(readAddressList(text)).toEqual({ addresses, wrong: [] });
	});

	it('keeps what is none as it was typed', () => {
		expect(readAddressList('ok@x.example, wren@, Tam, <>')).toEqual({
			addresses: ['ok@x.example'],
			wrong: ['wren@', 'Tam', '<>']
		});
		expect(readAddressList('<b>wren</b>@, Wren <w@x.example> Tam')).toEqual({
			addresses: ['w@x.example'],
			wrong: ['<b>wren</b>@', 'Tam']
		});
	});

	it('reads what was joined by any separators', () => {
		const separator = fc.stringMatching(/^[,;\n \t]*[,;\n ][,;\n \t]*$/);
		fc.assert(
			fc.property(fc.uniqueArray(address), separator, (addresses, between) => {
				expect(readAddressList(addresses.join(between))).toEqual({ addresses, wrong: [] });
			})
		);
	});

	it('lets nothing through that could reach into a header', () => {
		fc.assert(
			fc.property(fc.string(), fc.string(), (before, after) => {
				for (const one of readAddressList(`${before}a@x.example${after}`).addresses) {
					expect(one).toMatch(/^[^\s<>,;:"()]+@[a-z0-9.-]+$/);
				}
			})
		);
	});
});

describe('addressListProblem', () => {
	const problem = (text: string) => addressListProblem(readAddressList(text));
	const many = (count: number) =>
		Array.from({ length: count }, (_, i) => `p${i}@x.example`).join(' ');

	it.each([
		['a@x.example', null],
		['', 'at least one'],
		[' , ; ', 'at least one'],
		['a@x.example wren@', '“wren@” is no e-mail address'],
		['p q r s t', '“p”, “q”, “r” and 2 more are no e-mail addresses'],
		['x'.repeat(300), '…'],
		[many(MOST_ADDRESSES), null],
		[many(MOST_ADDRESSES + 1), 'At most 20 addresses at once; these are 21']
	])('says of %j: %s', (text, expected) => {
		const found = problem(text);
		if (expected === null) expect(found).toBeNull();
		else expect(found).toContain(expected);
	});
});
