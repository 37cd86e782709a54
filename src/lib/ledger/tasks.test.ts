import { describe, expect, it } from 'vitest';
import { lastDueDay } from './tasks';

describe('lastDueDay', () => {
	it.each([
		['2026-12-01', '2031-12-01'],
		['2028-02-29', '2033-02-28'],
		['2027-02-28', '2032-02-28']
	])('of %s is %s', (today, last) => {
		expect(lastDueDay(today)).toBe(last);
	});
});
