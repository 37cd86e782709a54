import { describe, expect, it } from 'vitest';
import { normaliseArxiv, normaliseDoi } from './identifiers';
import { BIBTEX_LIMITS, parseBibtex } from './parse-bibtex';

const ENTRY = `@article{arden04,
  author  = {Arden, Mira and Voss, Tam},
  title   = {A note on two {CHSH} settings},
  journal = {J. Invented Phys.},
  volume  = {12},
  pages   = {345--350},
  year    = {2004},
  eprint  = {2004.01234v2},
  doi     = {https://doi.org/10.5555/NOTE.two.settings}
}`;

async function problemOf(text: string) {
	const reading = await parseBibtex(text);
	if (reading.ok) throw new Error('was read');
	return reading;
}

async function referenceOf(text: string) {
	const reading = await parseBibtex(text);
	if (!reading.ok) throw new Error(reading.message);
	return reading.reference;
}

describe('a BibTeX entry', () => {
	it('becomes the strings that are shown', async () => {
		const reference = await referenceOf(ENTRY);
		expect(reference).toMatchObject({
			short: 'Arden & Voss 2004',
			source: 'M. Arden, T. Voss, J. Invented Phys. 12, 345–350 (2004)',
			title: 'A note on two CHSH settings',
			year: 2004,
			doi: '10.5555/note.two.settings',
			arxiv: '2004.01234v2'
		});
		expect(reference.formatted).toContain('Arden, M., & Voss, T. (2004). A note on two');
		expect(reference.csl.id).toBe('entry-1');
	});

	it('keeps accents, also those the parser misses by itself', async () => {
		const reference = await referenceOf(
			"@misc{x, title={On \\TeX{} and spins}, author={\\AA{}berg, Jos\\'e and M\\'{\\i}rez, Z}, year=2001}"
		);
		expect(reference.short).toBe('Åberg & Mírez 2001');
		expect(reference.title).toBe('On TeX and spins');
	});

	it('names more than two authors after the first', async () => {
		const many = await referenceOf(
			'@misc{x, title={T}, author={A, B and C, D and E, F}, year=1999}'
		);
		expect(many.short).toBe('A et al. 1999');
		const others = await referenceOf('@misc{x, title={T}, author={A, B and others}, year=1999}');
		expect(others.short).toBe('A et al. 1999');
	});

	it('with an unbalanced brace is refused with its line', async () => {
		const reading = await problemOf('@article{x,\n title={a},\n author={B {C},\n year=2000\n}');
		expect(reading.message).toBe('Line 3: this brace is never closed.');
		expect(reading.position).toBe(32);
		expect((await problemOf('@article{x, title={a}}\n}')).message).toBe(
			'Line 2: this closing brace has no opening one.'
		);
	});

	it('that is two is refused with the line of the second', async () => {
		const reading = await problemOf('@misc{x, title={a}, author={B}}\n\n@misc{y, title={b}}');
		expect(reading.message).toContain('Line 3: a second entry starts here');
		const typing = await problemOf('@misc{x, title={a}, author={B}}\n\n@misc{y, title={b');
		expect(typing.message).toContain('Line 3: a second entry starts here');
		const open = await problemOf('@misc{x, title={a, author={B}}\n\n@misc{y, title={b}}');
		expect(open.message).toContain('never closed');
	});

	it.each([
		['', 'Paste'],
		['junk', 'no BibTeX'],
		['@article{x title}', 'Line 1'],
		['@misc{x, author={B, C}}', 'no title'],
		['@misc{x, title={a}}', 'no author'],
		['@misc{x, title={a}, author={B}, doi={javascript:alert(1)}}', 'not a DOI'],
		[`@misc{x, title=${'{'.repeat(5000)}a${'}'.repeat(5000)}}`, 'nested too deeply'],
		['@misc{x, title={' + 'a'.repeat(200_000) + '}}', BIBTEX_LIMITS.characters.toLocaleString('en')]
	])('%.30s is refused in words', async (text, expected) => {
		expect((await problemOf(text)).message).toContain(expected);
	});

	it('never lets a key from outside through', async () => {
		const reference = await referenceOf('@misc{"><img/onerror=x>, title={a}, author={B}}').catch(
			(error: Error) => error
		);
		expect(JSON.stringify(reference)).not.toContain('"id":"\\"><img');
	});
});

describe('identifiers', () => {
	it.each([
		['10.5555/JIP.12.345', '10.5555/jip.12.345'],
		['doi:10.5555/a', '10.5555/a'],
		['http://dx.doi.org/10.5555/a.', '10.5555/a'],
		['https://doi.org/10.5555/a(b)c;d', '10.5555/a(b)c;d'],
		['10.55/a', null],
		['10.5555/', null],
		['10.5555/a b', null],
		['10.5555/a"onclick', null]
	])('DOI %s', (text, expected) => expect(normaliseDoi(text)).toBe(expected));

	it.each([
		['1412.0001', '1412.0001'],
		['1501.00001v3', '1501.00001v3'],
		['arXiv:hep-th/9901001', 'hep-th/9901001'],
		['math.CA/0611800v2', 'math.CA/0611800v2'],
		['https://arxiv.org/abs/2004.01234', '2004.01234'],
		['1501.0001', null],
		['1413.0001', null],
		['1412.00001', null],
		['0703.0001', null],
		['x', null]
	])('arXiv %s', (text, expected) => expect(normaliseArxiv(text)).toBe(expected));
});
