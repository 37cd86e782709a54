import { expect, it } from 'vitest';
import { dayWords } from './day-words';

it('says a day, or the day of a moment, in words', () => {
	expect(dayWords('2026-12-14')).toBe('14 Dec 2026');
	expect(dayWords('2027-01-05T23:59:00.000Z')).toBe('5 Jan 2027');
});
