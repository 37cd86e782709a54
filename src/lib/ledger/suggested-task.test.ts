import { describe, expect, it } from 'vitest';
import { suggestedTask, wantsTask } from './suggested-task';

const discrepancy = { status: 'discrepancy', reasonCode: 'above-upper-bound' } as const;
const unserved = { status: 'open', reasonCode: 'no-solver' } as const;

describe('wantsTask', () => {
	it.each([
		[true, 'active', discrepancy, []],
		[true, 'active', unserved, ['accepted', 'cancelled']],
		[false, 'active', unserved, ['cancelled', 'submitted']],
		[false, 'withdrawn', discrepancy, []],
		[false, 'superseded', discrepancy, []],
		[false, 'active', { status: 'open', reasonCode: 'running' }, []],
		[false, 'active', { status: 'agreement', reasonCode: 'within' }, []]
	] as const)('is %s for a claim that is %s, %o, with tasks %j', (wants, state, verdict, tasks) => {
		expect(wantsTask(state, verdict, tasks)).toBe(wants);
	});
});

it('is for nobody to reproduce what is to be corrected first', () => {
	expect(wantsTask('active', discrepancy, [], true)).toBe(false);
	expect(wantsTask('active', unserved, [], true)).toBe(false);
	expect(suggestedTask(discrepancy, false, true)).toBe('other');
});

describe('suggestedTask', () => {
	it('compares with the paper before it asks the authors', () => {
		expect(suggestedTask(discrepancy, false)).toBe('confirm-transcription');
		expect(suggestedTask(discrepancy, true)).toBe('ask-authors');
	});

	it('asks for another computation where no solver serves', () => {
		expect(suggestedTask(unserved, false)).toBe('recompute');
		expect(suggestedTask({ status: 'agreement', reasonCode: 'within' }, false)).toBe('other');
	});
});
