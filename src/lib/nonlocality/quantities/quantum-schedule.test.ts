import { describe, expect, it } from 'vitest';
import { familyFunctional } from '../scenario/families';
import { predictLevel } from './quantum-plan';
import { ArmHistory, mostPromising, type Arm } from './quantum-schedule';

const arm = (history: ArmHistory, seconds: number, open = true): Arm => ({
	history,
	seconds,
	open,
	run: () => undefined
});

describe('ArmHistory', () => {
	it('expects a share of the width that halves with every run without gain', () => {
		const history = new ArmHistory(1 / 2);
		expect(history.expectedGain(8)).toBe(4);
		history.note(0);
		expect(history.expectedGain(8)).toBe(2);
		history.note(0);
		expect(history.expectedGain(8)).toBe(1);
	});

	it('expects a quarter of the last gain where that is more, never more than the width', () => {
		const history = new ArmHistory(1 / 2);
		history.note(12);
		expect(history.expectedGain(8)).toBe(3);
		expect(history.expectedGain(2)).toBe(2);
		// a first side says nothing on the gain of the second
		const first = new ArmHistory(1);
		first.note(Infinity);
		expect(first.expectedGain(8)).toBe(4);
	});
});

describe('mostPromising', () => {
	it('takes the largest expected gain per second among what is open', () => {
		const [slow, fast] = [arm(new ArmHistory(1), 10), arm(new ArmHistory(1 / 4), 1)];
		expect(mostPromising([slow, fast], 1)).toBe(fast);
		expect(mostPromising([slow, arm(new ArmHistory(1), 1, false)], 1)).toBe(slow);
		expect(mostPromising([arm(new ArmHistory(1), 1, false)], 1)).toBeNull();
		const gaining = new ArmHistory(1 / 4);
		gaining.note(0.8);
		expect(mostPromising([arm(new ArmHistory(1 / 8), 1), arm(gaining, 1)], 1)?.history).toBe(
			gaining
		);
	});

	it('turns to another arm after runs in vain, before both sides are known, too', () => {
		const [first, second] = [new ArmHistory(1 / 2), new ArmHistory(1 / 8)];
		const arms = [arm(first, 1), arm(second, 1)];
		for (let run = 0; run < 3; run++) {
			expect(mostPromising(arms, Infinity)?.history).toBe(first);
			first.note(0);
		}
		expect(mostPromising(arms, Infinity)?.history).toBe(second);
	});
});

describe('predictLevel', () => {
	const order = (n: number) => () => n;

	it('grows with the level, and says what is past the limits', () => {
		const g = familyFunctional({ name: 'i3322' });
		const [first, second, third] = ([1, 2, 3] as const).map((level) =>
			predictLevel(g, level, order(1))
		);
		expect(second?.seconds).toBeGreaterThan(10 * (first?.seconds ?? 0));
		expect(third?.seconds).toBeGreaterThan(10 * (second?.seconds ?? 0));
		expect(third?.refused).toBeNull();
		const large = predictLevel(familyFunctional({ name: 'cglmp', d: 6 }), 4, order(1));
		expect(large.seconds).toBe(Infinity);
		expect(large.refused).toMatch(/rows; the limit is 600/);
	});

	it('counts on symmetries where a level is dear, and on the dual of level 1', () => {
		const g = familyFunctional({ name: 'i3322' });
		expect(predictLevel(g, 4, order(8)).seconds).toBeLessThan(
			predictLevel(g, 4, order(1)).seconds / 8
		);
		const wide = familyFunctional({ name: 'chained', n: 60 });
		expect(predictLevel(wide, 1, order(1)).seconds).toBeLessThan(2);
	});
});
