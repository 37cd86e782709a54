import { describe, expect, it } from 'vitest';
import { ProblemError, ProblemLimitError, parseProblem } from './problem';

const chsh = { family: { name: 'chsh' } };

const seeSaw = { quantity: 'see-saw', ...chsh, dimension: 2 };

/** Answers 0 always; output 1 has the given weight as well, which spoils it unless that is 0. */
function answersZero(other: number, size = 1): object {
	const matrix = (entry: number) =>
		Array.from({ length: size }, (_, i) =>
			Array.from({ length: size }, (_, j) => [i === j ? entry : 0, 0])
		);
	const party = [0, 1].map(() => [matrix(1), matrix(other)]);
	return { family: 'quantum', state: [[1, 0]], measurements: [party, party] };
}

function failure(json: unknown): unknown {
	try {
		parseProblem(json);
	} catch (error) {
		return error;
	}
	return null;
}

describe('what is malformed names its field', () => {
	const two = [
		[2, 2],
		[2, 2]
	];
	it.each<[unknown, string, RegExp]>([
		[null, 'problem', /must be an object/],
		[[], 'problem', /must be an object/],
		['{}', 'problem', /must be an object/],
		[{}, 'quantity', /is missing/],
		[{ quantity: 'magic' }, 'quantity', /"magic" is none of value, local/],
		[{ quantity: 'local' }, 'terms', /is missing/],
		[{ quantity: 'local', terms: [[1, []]] }, 'outputs', /is missing/],
		[{ quantity: 'local', outputs: [[1, 2]], terms: [] }, 'outputs[0][0]', /at least 2/],
		[{ quantity: 'local', outputs: [[]], terms: [] }, 'outputs[0]', /an input/],
		[
			{ quantity: 'local', outputs: two, terms: [[1, [[0, 2, 0]]]] },
			'terms[0][1][0]',
			/party 0 has no input 2/
		],
		[
			{ quantity: 'local', outputs: two, terms: [[1, [[0, 0, 2]]]] },
			'terms[0][1][0]',
			/no output 2/
		],
		[
			{ quantity: 'local', outputs: two, terms: [[1, [[2, 0, 0]]]] },
			'terms[0][1][0]',
			/no party 2/
		],
		[
			{
				quantity: 'local',
				outputs: two,
				terms: [
					[
						1,
						[
							[0, 0, 0],
							[0, 1, 0]
						]
					]
				]
			},
			'terms[0][1][1]',
			/twice/
		],
		[{ quantity: 'local', outputs: two, terms: [['x', []]] }, 'terms[0][0]', /x is not a number/],
		[{ quantity: 'local', outputs: two, terms: [[NaN, []]] }, 'terms[0][0]', /number/],
		[{ quantity: 'local', outputs: two, terms: [['1/0', []]] }, 'terms[0][0]', /division by zero/],
		[{ quantity: 'local', outputs: two, terms: [[1]] }, 'terms[0]', /\[coefficient, events\]/],
		[
			{ quantity: 'local', outputs: two, terms: [[1, [[0, 0.5, 0]]]] },
			'terms[0][1][0][1]',
			/whole number/
		],
		[{ quantity: 'local', ...chsh, expression: 'A0' }, 'family', /only one of/],
		[
			{ quantity: 'local', expression: 'A0 B0 +' },
			'expression',
			/ends too early \(at position 7\)/
		],
		[{ quantity: 'local', expression: 'A2 B0', outputs: two }, 'expression', /no input 2/],
		[{ quantity: 'local', family: { name: 'cglmp', d: 1 } }, 'family', /from 2 to 12/],
		[{ quantity: 'local', family: { name: 'none' } }, 'family', /no family named/],
		[{ quantity: 'local', family: 'chsh' }, 'family', /an object such as/],
		[{ quantity: 'local', ...chsh, outputs: [[2], [2]] }, 'outputs', /is for the outputs/],
		[{ quantity: 'local', collinsGisin: [[1, 2], [3]] }, 'collinsGisin', /row 2/],
		[{ quantity: 'local', probabilities: { '0|0,0': 1 } }, 'probabilities', /names no probability/],
		[{ quantity: 'local', ...chsh, sense: 'up' }, 'sense', /max or min/],
		[{ quantity: 'local', ...chsh, seed: -1 }, 'seed', /at least 0/],
		[{ quantity: 'local', ...chsh, seconds: 0 }, 'seconds', /positive/],
		[{ quantity: 'local', ...chsh, format: 2 }, 'format', /1/],
		[{ quantity: 'local', ...chsh, colour: 'red' }, 'colour', /not known/],
		[
			{ quantity: 'hybrid', ...chsh, model: 'svetlichny' },
			'quantity',
			/three parties or more, not 2/
		],
		[{ quantity: 'hybrid', family: { name: 'mermin', n: 3 } }, 'model', /is missing: "svetlichny"/],
		[
			{ quantity: 'hybrid', family: { name: 'mermin', n: 3 }, model: 'quantum' },
			'model',
			/"svetlichny" or "no-signalling"/
		],
		[
			{
				quantity: 'facet',
				...chsh,
				constraints: [{ expression: 'A0', relation: '<=', value: 0 }]
			},
			'constraints',
			/no part in the quantity facet/
		],
		[{ quantity: 'npa', ...chsh }, 'level', /is missing/],
		[{ quantity: 'npa', ...chsh, level: '2+AB' }, 'level', /1, 2, 3/],
		[
			{ quantity: 'npa', family: { name: 'mermin', n: 3 }, level: '1+AB' },
			'level',
			/two parties, not 3/
		],
		[{ quantity: 'npa', ...chsh, level: { products: ['AC'] } }, 'level.products[0]', /beyond B/],
		[{ quantity: 'see-saw', ...chsh }, 'dimension', /is missing/],
		[{ quantity: 'see-saw', ...chsh, dimension: [2] }, 'dimension', /each of the 2 parties/],
		[{ quantity: 'see-saw', ...chsh, dimension: 2, state: [[1, 0]] }, 'state', /4 components/],
		[{ ...seeSaw, grow: 1 }, 'grow', /at least the dimension 2/],
		[{ ...seeSaw, grow: 'large' }, 'grow', /whole number/],
		[{ ...seeSaw, grow: 4, state: 'maximally-entangled' }, 'grow', /state is given/],
		[
			{ ...seeSaw, grow: 4, constraints: [{ expression: 'A0', relation: '=', value: 0 }] },
			'grow',
			/constraints/
		],
		[{ ...seeSaw, start: { family: 'uniform' } }, 'start', /a quantum strategy such as/],
		[{ ...seeSaw, start: answersZero(1) }, 'start', /sum to the identity/],
		[{ ...seeSaw, start: answersZero(0, 2) }, 'start.state', /2 x 2 = 4 components, not 1/],
		[
			{ quantity: 'quantum', ...chsh, start: { ...answersZero(0), measurements: [] } },
			'start.measurements',
			/at least two elements/
		],
		[{ ...seeSaw, start: answersZero(0), state: 'maximally-entangled' }, 'start', /state is given/],
		[{ quantity: 'value', ...chsh }, 'box', /is missing/],
		[{ quantity: 'value', ...chsh, box: { '0,0|0,7': 1 } }, 'box["0,0|0,7"]', /outside/],
		[{ quantity: 'value', ...chsh, box: { family: 'isotropic', d: 2 } }, 'box.E', /is missing/],
		[{ quantity: 'value', ...chsh, box: { family: 'isotropic', d: 2, E: 2 } }, 'box.E', /from -1/],
		[{ quantity: 'local', ...chsh, box: { family: 'uniform' } }, 'box', /no part/],
		[
			{ quantity: 'local', ...chsh, constraints: [{ expression: 'A7', relation: '=', value: 0 }] },
			'constraints[0].expression',
			/no input 7/
		],
		[
			{ quantity: 'local', ...chsh, constraints: [{ expression: 'A0', relation: '==', value: 0 }] },
			'constraints[0].relation',
			/<=/
		],
		[
			JSON.parse(
				'{"quantity": "local", "family": {"name": "chsh"}, "__proto__": {"sense": "min"}}'
			),
			'__proto__',
			/not known/
		]
	])('%j', (json, field, message) => {
		const error = failure(json);
		expect(error).toBeInstanceOf(ProblemError);
		expect(error).toMatchObject({ field });
		expect(String(error)).toMatch(message);
	});
});

describe('a box that is no behaviour', () => {
	const value = (box: object) => failure({ ...chsh, quantity: 'value', box });
	it.each<[object, RegExp]>([
		[{ '0,0|0,0': 1, '0,0|0,1': 1, '0,0|1,0': 1, '0,0|1,1': 0.9 }, /sum to 9\/10, not 1/],
		[{ '0,0|0,0': 1, '0,0|0,1': 1, '0,0|1,0': 1, '1,1|1,1': 1 }, /signalling/],
		[{ '0,0|0,0': 2, '0,1|0,0': -1, '0,0|0,1': 1, '0,0|1,0': 1, '0,0|1,1': 1 }, /negative/]
	])('%j', (box, message) => {
		expect(value(box)).toBeInstanceOf(ProblemError);
		expect(value(box)).toMatchObject({ field: 'box' });
		expect(String(value(box))).toMatch(message);
	});
});

describe('what is too large names its limit', () => {
	const wide = (n: number) => Array.from({ length: n }, () => 2);
	it.each<[object, RegExp]>([
		[{ quantity: 'local', family: { name: 'cglmp', d: 50 } }, /from 2 to 12/],
		[
			{ quantity: 'local', outputs: Array.from({ length: 7 }, () => [2]), terms: [] },
			/at most 6 parties, not 7/
		],
		[
			{ quantity: 'local', outputs: [wide(201), wide(2)], terms: [] },
			/at most 200 inputs per party, not 201/
		],
		[{ quantity: 'local', outputs: [[65]], terms: [] }, /at most 64 outputs/],
		[
			{ quantity: 'local', outputs: Array.from({ length: 4 }, () => [64]), terms: [] },
			/at most 1000000 joint probabilities, not 16777216/
		],
		[
			{
				quantity: 'local',
				outputs: [0, 1, 2].map(() => [32, 32, 32]),
				terms: [0, 1, 2].flatMap((x) =>
					[0, 1, 2].flatMap((y) =>
						[0, 1, 2].map((z) => [1, [x, y, z].map((input, party) => [party, input, 31])])
					)
				)
			},
			/at most 500000 terms without the last outputs, not 884736/
		],
		[
			{ quantity: 'local', outputs: [[2]], terms: Array.from({ length: 170_001 }, () => [1, []]) },
			/at most 170000 terms, not 170001/
		],
		[{ quantity: 'local', expression: 'A0+'.repeat(2000) }, /at most 4,000 characters/],
		[{ quantity: 'npa', ...chsh, level: 11 }, /at most 10/],
		[{ quantity: 'see-saw', ...chsh, dimension: 17 }, /at most 16/],
		[{ ...seeSaw, grow: 65 }, /at most 64/],
		[{ quantity: 'local', ...chsh, seconds: 1e6 }, /at most 3600/],
		[{ quantity: 'value', ...chsh, box: { family: 'isotropic', d: 1000, E: 0 } }, /at most 32/]
	])('%#', (json, message) => {
		const error = failure(json);
		expect(error).toBeInstanceOf(ProblemLimitError);
		expect(String(error)).toMatch(message);
	});
});
