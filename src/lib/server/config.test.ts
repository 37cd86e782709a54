import { describe, expect, it } from 'vitest';
import { readConfig } from './config';

const secret = 's'.repeat(32);

describe('readConfig', () => {
	it('has a default for everything but the secret', () => {
		const config = readConfig({ MERESTONE_SECRET: secret });
		expect(config).toMatchObject({
			port: 3000,
			origin: 'http://localhost:3000',
			originGiven: false,
			secure: false,
			databaseUrl: 'file:data/merestone.db',
			filesUrl: 'file:data/files',
			smtpUrl: null,
			demo: false,
			budgetSeconds: 60
		});
	});

	it('takes administrators by account id, never by address', () => {
		const ids = ['01a23203-b04c-7054-a22f-8ef2f364b646', '01a23203-d9e8-731b-aa76-862ffee23bb9'];
		const read = (text: string) =>
			readConfig({ MERESTONE_SECRET: secret, MERESTONE_ADMINS: text }).admins;
		expect(read(` ${ids.join(' , ')},`)).toEqual(ids);
		expect(read('')).toEqual([]);
		expect(() => read('wren@reading.example')).toThrow(/MERESTONE_ADMINS: expected account ids/);
	});

	it('needs no secret in the demo only', () => {
		expect(() => readConfig({})).toThrow(/MERESTONE_SECRET: expected at least 32 characters/);
		expect(() => readConfig({ MERESTONE_SECRET: 'short' })).toThrow(/MERESTONE_SECRET/);
		expect(readConfig({ MERESTONE_DEMO: '1' }).demo).toBe(true);
	});

	it.each([
		['PORT', 'many', 'port number'],
		['PORT', '70000', 'up to 65535'],
		['ORIGIN', 'merestone', 'https://merestone.example'],
		['ORIGIN', 'ftp://merestone.example', 'https://merestone.example'],
		['DATABASE_URL', 'postgres://x', 'file:data/merestone.db'],
		['FILES_URL', '/var/files', 'file:data/files'],
		['FILES_URL', 's3://evidence', 'region'],
		['SMTP_URL', 'http://mail.example', 'smtp://localhost:1025'],
		['MERESTONE_MAIL_FROM', 'a@b.example\r\nBcc: c@d.example', 'sender'],
		['MERESTONE_DEMO', 'yes', '1 or 0'],
		['MERESTONE_LOG', 'loud', 'one of silent'],
		['MERESTONE_THREADS', '0', '1 to 64'],
		['MERESTONE_BUDGET_SECONDS', '0', 'at least 1']
	])('stops at %s=%s and says what is expected', (name, value, expected) => {
		const read = () => readConfig({ MERESTONE_SECRET: secret, [name]: value });
		expect(read).toThrow(name);
		expect(read).toThrow(expected);
	});

	it('takes the origin without its path and knows a secure one', () => {
		const config = readConfig({ MERESTONE_SECRET: secret, ORIGIN: 'https://merestone.example/x' });
		expect(config).toMatchObject({ origin: 'https://merestone.example', secure: true });
	});
});
