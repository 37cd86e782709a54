import { describe, expect, it } from 'vitest';
import { emailAddress, localPath, oneLine } from './account';

describe('localPath', () => {
	it.each(['/', '/g/harbour?q=a%20b#x', '/join/abc'])('takes %s', (path) => {
		expect(localPath(path)).toBe(path);
	});

	it.each([
		'',
		'//elsewhere.example',
		'/\\elsewhere.example',
		'/a\\b',
		'https://elsewhere.example',
		'javascript:alert(1)',
		'g/harbour',
		'/a\r\nSet-Cookie: x=1',
		'/\t/elsewhere.example'
	])('drops %j', (path) => {
		expect(localPath(path)).toBeNull();
	});
});

describe('fields that reach a mail', () => {
	it.each(['a\nb', 'a\r\nBcc: x@y.example', 'a\u2028b', 'a\0b', 'a\u202eb', 'a\u2067b'])(
		'refuse %j',
		(text) => {
			expect(oneLine(80, 'missing').safeParse(text).success).toBe(false);
			expect(emailAddress.safeParse(`${text}@y.example`).success).toBe(false);
		}
	);

	it('take a name in whatever script', () => {
		for (const name of ['Ines Harrow', 'أمل', 'נועה', '明', "O'Neill-Źdźbło"]) {
			expect(oneLine(80, 'missing').parse(name)).toBe(name);
		}
	});

	it('keep an address in lower case', () => {
		expect(emailAddress.parse(' Ines@Harrow.example ')).toBe('ines@harrow.example');
	});
});
