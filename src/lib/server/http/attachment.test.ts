import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { attachment, attachmentHeaders } from './attachment';

describe('attachment', () => {
	// The example of RFC 6266, section 5: filename*=UTF-8''%e2%82%ac%20rates.
	it('writes a name as RFC 6266 and RFC 8187 do', () => {
		expect(attachment('€ rates')).toBe(
			'attachment; filename="_ rates"; filename*=UTF-8\'\'%E2%82%AC%20rates'
		);
	});

	it('lets no name end its place or the header', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary', maxLength: 60 }), (name) => {
				const match = /^attachment; filename="([^"\\%]*)"; filename\*=UTF-8''(.*)$/.exec(
					attachment(name)
				);
				// attr-char and pct-encoded of RFC 8187, section 3.2.1.
				expect(match?.[2]).toMatch(/^(?:[A-Za-z0-9!#$&+\-.^_`|~]|%[0-9A-F]{2})*$/);
				expect(match?.[1]).toMatch(/^[\x20-\x7e]*$/);
				expect(() => new Headers({ 'Content-Disposition': attachment(name) })).not.toThrow();
				expect(decodeURIComponent(match?.[2] ?? '')).toBe(name.replace(/\p{Cs}/gu, '_'));
			})
		);
	});

	it('comes with what keeps a file from running', () => {
		const headers = attachmentHeaders('notes.txt', 'text/plain; charset=utf-8', 12);
		expect(headers['Content-Security-Policy']).toContain('sandbox');
		expect(headers).toMatchObject({ 'X-Content-Type-Options': 'nosniff', 'Content-Length': '12' });
	});
});
