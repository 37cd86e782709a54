import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { gzipSync } from 'node:zlib';
import { TASK_LIMITS } from '../../../schemas/task-input';
import { checkFile } from './check-file';
import { cleanName, NAME_LIMIT } from './clean-name';
import { servedType } from './file-kinds';

const text = (content: string) => new TextEncoder().encode(content);
const bytes = (...values: number[]) => Uint8Array.from(values);

// First bytes as the formats' own standards give them: ISO 32000 (PDF), the PNG specification
// (ISO/IEC 15948), RFC 1952 (gzip), APPNOTE 4.3.7 (zip), JFIF (JPEG).
const PDF = text('%PDF-1.7\n%âãÏÓ\n1 0 obj\n<<>>\nendobj\n');
const PNG = bytes(
	...[0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0x49, 0x48, 0x44, 0x52],
	...[0, 0, 0, 1, 0, 0, 0, 1, 8, 2, 0, 0, 0, 0x90, 0x77, 0x53, 0xde, 0, 0, 0, 0],
	...[0x49, 0x44, 0x41, 0x54, 0, 0, 0, 0]
);
const JPEG = bytes(0xff, 0xd8, 0xff, 0xe0, 0, 16, 0x4a, 0x46, 0x49, 0x46, 0, 1, 1, 0, 0, 1, 0, 1);
const ZIP = bytes(
	...[0x50, 0x4b, 0x03, 0x04, 20, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0],
	...[0, 0, 0, 0, 5, 0, 0, 0, 0x61, 0x2e, 0x74, 0x78, 0x74]
);
const GZIP = new Uint8Array(gzipSync('0.25\n'));
// NumPy's NPY format, MathWorks' MAT-File Format (level 5 header text), the HDF5 file format
// specification (signature), the .xz file format 1.2 and bzip2's magic.
const NPY = bytes(0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, 0x76, 0);
const MAT = text('MATLAB 5.0 MAT-file, Platform: GLNXA64'.padEnd(128));
const HDF5 = bytes(0x89, 0x48, 0x44, 0x46, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 0);
const MAT73 = new Uint8Array([...text('MATLAB 7.3 MAT-file'.padEnd(512)), ...HDF5]);
const XZ = bytes(0xfd, 0x37, 0x7a, 0x58, 0x5a, 0x00, 0, 4, 0xe6, 0xd6, 0xb4, 0x46);
const BZIP2 = bytes(0x42, 0x5a, 0x68, 0x39, 0x31, 0x41, 0x59, 0x26, 0x53, 0x59);
const EXE = bytes(0x4d, 0x5a, 0x90, 0, 3, 0, 0, 0, 4, 0, 0, 0, 0xff, 0xff, 0, 0);

const problemOf = async (name: string, content: Uint8Array) => {
	const result = await checkFile({ name, bytes: content }, 1);
	return 'problem' in result ? result.problem : null;
};

describe('checkFile', () => {
	it.each([
		['paper.pdf', PDF, 'application/pdf'],
		['plot.png', PNG, 'image/png'],
		['photo.JPG', JPEG, 'image/jpeg'],
		['run.log.gz', GZIP, 'application/gzip'],
		['all.zip', ZIP, 'application/zip'],
		['run.py', text('print(0.25)\n'), 'text/plain; charset=utf-8'],
		['a.npy', NPY, 'application/octet-stream'],
		['a.npz', ZIP, 'application/zip'],
		['a.mat', MAT, 'application/octet-stream'],
		['b.mat', MAT73, 'application/octet-stream'],
		['a.h5', HDF5, 'application/octet-stream'],
		['a.HDF5', HDF5, 'application/octet-stream'],
		['all.tar.xz', XZ, 'application/x-xz'],
		['all.tar.bz2', BZIP2, 'application/x-bzip2'],
		['set.yaml', text('level: 3'), 'text/plain; charset=utf-8'],
		['set.yml', text('level: 3'), 'text/plain; charset=utf-8'],
		['set.toml', text('level = 3'), 'text/plain; charset=utf-8'],
		['level2.dat-s', text('1\n1\n1\n1.0\n'), 'text/plain; charset=utf-8'],
		['fit.R', text('x <- 1'), 'text/plain; charset=utf-8'],
		['Überprüfung.ipynb', text('{"cells": []}'), 'text/plain; charset=utf-8']
	])('takes %s by its ending and its content', async (name, content, mediaType) => {
		const result = await checkFile({ name, bytes: content }, 1);
		expect(result).toEqual({ name, mediaType, bytes: content });
	});

	it.each([
		['empty.txt', bytes(), 'is empty'],
		['page.html', text('<script>alert(1)</script>'), 'ends in .html, which is not taken'],
		['picture.svg', text('<svg/>'), 'ends in .svg'],
		['run.exe', EXE, 'ends in .exe'],
		['noending', text('x'), 'has no ending'],
		['.txt', text('x'), 'has no ending'],
		['paper.pdf', EXE, 'although its ending says application/pdf'],
		['paper.pdf', text('<html>'), 'holds something else'],
		['plot.png', JPEG, 'holds image/jpeg'],
		['all.zip', GZIP, 'holds application/gzip'],
		['a.npy', EXE, 'is not an array of NumPy'],
		['a.npz', NPY, 'although its ending says application/zip'],
		['a.mat', HDF5, 'is not a MAT-file'],
		['b.mat', text('MATLAB 7.3 MAT-file'), 'is not a MAT-file'],
		['a.h5', text('HDF'), 'is not an HDF5 file'],
		['a.xz', BZIP2, 'holds application/x-bzip2'],
		['set.yaml', NPY, 'holds a NUL'],
		['run.py', bytes(0x61, 0, 0x62), 'holds a NUL'],
		['run.py', bytes(0xff, 0xfe, 0x61), 'is not in UTF-8'],
		['...', text('x'), 'File 1 has no usable name'],
		['a.pdf.exe', PDF, 'ends in .exe'],
		['run.py\u202etxt.exe', text('x'), '.exe']
	])('refuses %s and says why', async (name, content, why) => {
		expect(await problemOf(name, content)).toContain(why);
	});

	it('takes a file at its limit and refuses one byte more', async () => {
		const most = new Uint8Array(TASK_LIMITS.fileBytes).fill(0x30);
		expect(await problemOf('digits.txt', most)).toBeNull();
		const more = new Uint8Array(TASK_LIMITS.fileBytes + 1).fill(0x30);
		expect(await problemOf('digits.txt', more)).toContain('has 10.1 MB, a file may have 10 MB');
	});

	it('never fails on content made at random', async () => {
		await fc.assert(
			fc.asyncProperty(
				fc.constantFrom(PDF, PNG, JPEG, ZIP, GZIP),
				fc.uint8Array({ maxLength: 200 }),
				fc.nat(20),
				async (start, rest, cut) => {
					const content = new Uint8Array([...start.slice(0, cut), ...rest]);
					const result = await checkFile({ name: 'x.zip', bytes: content }, 1);
					expect('problem' in result || result.mediaType === 'application/zip').toBe(true);
				}
			)
		);
	});
});

describe('cleanName', () => {
	it.each([
		['../../etc/passwd', 'passwd'],
		['..\\..\\windows\\system.ini', 'system.ini'],
		['C:\\Users\\mo\\run.py', 'run.py'],
		['/etc/shadow/', 'shadow'],
		['.bashrc', 'bashrc'],
		['run.py ', 'run.py'],
		['run.py...', 'run.py'],
		['a\r\nSet-Cookie: x.txt', 'aSet-Cookie_ x.txt'],
		['a\u0000.txt', 'a.txt'],
		// U+202E shows "gpj.exe" as "exe.jpg".
		['photo\u202egpj.exe', 'photogpj.exe'],
		['zero\u200bwidth.txt', 'zerowidth.txt'],
		['CON.txt', '_CON.txt'],
		['lpt1', '_lpt1'],
		['com¹.log', '_com¹.log'],
		['a:b|c?.txt', 'a_b_c_.txt'],
		['e\u0301tude.tex', 'étude.tex'],
		['数据.csv', '数据.csv']
	])('keeps of %j only %j', (given, kept) => {
		expect(cleanName(given)).toBe(kept);
	});

	it.each(['', '..', '../..', '/', ' . ', '\u202e', '\u0000'])('finds no name in %j', (given) => {
		expect(cleanName(given)).toBeNull();
	});

	it('keeps an ending when it cuts', () => {
		const kept = cleanName(`${'a'.repeat(300)}.dat-s`);
		expect(kept).toHaveLength(NAME_LIMIT);
		expect(kept).toMatch(/a\.dat-s$/);
	});

	it('leaves a name that is a path to nowhere, of whatever it is made', () => {
		const unit = fc.constantFrom('.', '/', '\\', ' ', 'a', 'CON', ':', '\u202e', '\n', '€', '𝕏');
		fc.assert(
			fc.property(fc.oneof(fc.string({ unit }), fc.string({ unit: 'binary' })), (given) => {
				const kept = cleanName(given);
				if (kept === null) return;
				expect(kept).not.toMatch(/[/\\\p{Cc}\p{Cf}\p{Cs}"<>:|?*]|^[. ]|[. ]$/u);
				expect([...kept].length).toBeLessThanOrEqual(NAME_LIMIT + 1);
				expect(cleanName(kept)).toBe(kept);
			}),
			{ numRuns: 2_000 }
		);
	});
});

it('a stored file is sent as what runs nothing', () => {
	expect(servedType('application/pdf')).toBe('application/octet-stream');
	expect(servedType('application/x-xz')).toBe('application/octet-stream');
	expect(servedType('text/html')).toBe('application/octet-stream');
	expect(servedType('image/png')).toBe('image/png');
});
