import { describe, expect, it } from 'vitest';
import { parseProblem } from './problem';

const seeSaw = { family: { name: 'chsh' }, quantity: 'see-saw', dimension: 2 };
/** Both parties always answer 0. */
const always = [0, 1].map(() => [[[['1', 0]]], [[[0, 0]]]]);
const strategy = { state: [[1, 0]], measurements: [always, always] };
const normal = {
	dimensions: [1, 1],
	state: [[1, 0]],
	measurements: [0, 1].map(() => [0, 1].map(() => [[[[1, 0]]], [[[0, 0]]]]))
};

describe('where a search starts and how far it goes', () => {
	it.each([
		{ family: 'quantum', ...strategy },
		{ kind: 'quantum', strategy: { dimensions: [1, 1], ...strategy } },
		{ dimensions: [1, 1], ...strategy }
	])('reads a strategy in any of its forms: %#', (start) => {
		const problem = parseProblem({ ...seeSaw, start });
		expect(problem).toMatchObject({ start: normal });
		expect(
			parseProblem({ ...seeSaw, quantity: 'quantum', dimension: undefined, start })
		).toMatchObject({ quantity: 'quantum', start: normal });
		expect(parseProblem(JSON.parse(JSON.stringify(problem)))).toEqual(problem);
	});

	it('keeps the dimension to grow to and constraints, and adds neither', () => {
		const constraints = [{ expression: 'A0', relation: '<=', value: '1/2' }];
		for (const more of [{ grow: 40 }, { constraints }, {}]) {
			const problem = parseProblem({ ...seeSaw, ...more });
			expect(Object.hasOwn(problem, 'grow')).toBe('grow' in more);
			expect(Object.hasOwn(problem, 'start')).toBe(false);
			expect(problem.constraints).toHaveLength('constraints' in more ? 1 : 0);
			expect(parseProblem(JSON.parse(JSON.stringify(problem)))).toEqual(problem);
		}
	});
});
