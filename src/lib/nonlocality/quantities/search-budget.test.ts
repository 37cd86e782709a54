import { describe, expect, it } from 'vitest';
import { SolverStop } from '../problem';
import { BudgetSpent, expectBudgetSpent, pollWithin, stopOfPart } from './search-budget';

describe('pollWithin', () => {
	it('throws past its seconds, and before that when it is told to stop', () => {
		let now = 0;
		let stop = false;
		const poll = pollWithin({ now: () => now, shouldStop: () => stop, report: () => {} }, 1);
		now = 1000;
		expect(poll).not.toThrow();
		now = 1001;
		expect(poll).toThrow(BudgetSpent);
		stop = true;
		expect(poll).toThrow(SolverStop);
	});
});

describe('what a part of a search may throw', () => {
	it('is the end of its seconds', () => {
		expect(() => expectBudgetSpent(new BudgetSpent())).not.toThrow();
		expect(() => expectBudgetSpent(new TypeError('a defect'))).toThrow('a defect');
	});

	it('is a limit of its own, not the cancellation of all', () => {
		expect(stopOfPart(new SolverStop('limit', 'too large')).message).toBe('too large');
		expect(() => stopOfPart(new SolverStop('cancelled', 'stopped'))).toThrow('stopped');
		expect(() => stopOfPart(new TypeError('a defect'))).toThrow('a defect');
	});
});
