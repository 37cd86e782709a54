import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findMentions, handleOf, handlesOf } from './mentions';

const people = (...names: string[]) => names.map((name, i) => ({ id: `id${i}`, name }));
const handles = (...names: string[]) => handlesOf(people(...names)).map(({ handle }) => handle);

describe('handles', () => {
	it('are the whole name, and the first name where only one has it', () => {
		expect(handles('Wren Aldous', 'Inés Calder', 'Ines Vale')).toEqual([
			'wren',
			'wren-aldous',
			'ines-calder',
			'ines-vale'
		]);
	});

	it('are numbered where two have the same name', () => {
		expect(handles('Wren Aldous', 'Wren Aldous')).toEqual(['wren-aldous', 'wren-aldous-2']);
	});

	it('leave a first name to the one whose whole name it is', () => {
		expect(handles('Wren', 'Tam Voss')).toEqual(['wren', 'tam', 'tam-voss']);
		expect(handles('Wren', 'Wren Aldous')).toEqual(['wren', 'wren-aldous']);
	});

	it('are made of letters of any script, digits and hyphens', () => {
		expect(['Zoë O’Brien-Łęcki', '  李 明 ', 'Dr. J. 3rd'].map(handleOf)).toEqual([
			'zoe-o-brien-łecki',
			'李-明',
			'dr-j-3rd'
		]);
		expect(handles('!!!', '???')).toEqual(['member', 'member-2']);
	});

	it('are unique, and everybody has one that is offered', () => {
		fc.assert(
			fc.property(fc.array(fc.string({ unit: fc.constantFrom(...'ab2- é') })), (names) => {
				const all = handlesOf(people(...names));
				expect(new Set(all.map(({ handle }) => handle)).size).toBe(all.length);
				const offered = all.filter((handle) => handle.offered).map(({ id }) => id);
				expect(offered).toEqual(people(...names).map(({ id }) => id));
			})
		);
	});
});

describe('findMentions', () => {
	const known = handlesOf(people('Wren Aldous', 'Inés Calder'));
	const found = (text: string) =>
		findMentions(text, known).map(({ id, start, end }) => `${id}:${text.slice(start, end)}`);

	it.each([
		['@wren', ['id0:@wren']],
		['ask @Wren, or (@wren-aldous).', ['id0:@Wren', 'id0:@wren-aldous']],
		['@inés and @ines', ['id1:@inés', 'id1:@ines']],
		['the @wren-style proof', ['id0:@wren']],
		['wren@wren.example', []],
		['@wren@elsewhere.example', []],
		['https://x.example/@wren', []],
		['@wrens @nobody @ @@wren', []]
	])('finds in %j exactly %j', (text, expected) => {
		expect(found(text)).toEqual(expected);
	});

	it('finds every handle that was typed between spaces', () => {
		fc.assert(
			fc.property(fc.array(fc.constantFrom(...known)), (typed) => {
				const text = typed.map(({ handle }) => `@${handle}`).join(' ');
				expect(findMentions(text, known).map(({ handle }) => handle)).toEqual(
					typed.map(({ handle }) => handle)
				);
			})
		);
	});
});
