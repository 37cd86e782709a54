import { expect, it } from 'vitest';
import { NotationError, NotationLimitError, errorWithin } from './notation-error';

it("puts a part's place before its message, and keeps what to do about it", () => {
	const part = new NotationError('x is not a number', 3, 'Write a number.');
	expect(errorWithin('row 2', part)).toMatchObject({
		message: 'row 2: x is not a number',
		position: null,
		suggestion: 'Write a number.'
	});
	const defect = new TypeError('a defect');
	expect(() => errorWithin('row 2', defect)).toThrow(defect);
});

it('names a limit without a place', () => {
	expect(new NotationLimitError('more than 5')).toMatchObject({ position: null, suggestion: null });
});
