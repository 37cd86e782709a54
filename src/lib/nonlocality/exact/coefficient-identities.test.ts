import { describe, expect, it } from 'vitest';
import { equalCoefficients } from './coefficient';
import { parseCoefficient } from './expression';

describe('known identities', () => {
	it.each([
		['sqrt(8)/sqrt(2)', '2'],
		['1/(sqrt(2)-1)', '1+sqrt(2)'],
		['(1+sqrt(2))*(1-sqrt(2))', '-1'],
		['sqrt(2)*sqrt(3)', 'sqrt(6)'],
		['sqrt(12)', '2*sqrt(3)'],
		['sqrt(1/2)', 'sqrt(2)/2'],
		['2^(1/2)', 'sqrt(2)'],
		['2^(-1/2)', 'sqrt(2)/2'],
		['cos(pi/3)', '1/2'],
		['sin(pi/6)', '1/2'],
		['sin(0)', '0'],
		['cos(0)', '1'],
		['cos(pi)', '-1'],
		['cos(9*pi/4)', 'sqrt(2)/2'],
		['cos(pi/7)+cos(6*pi/7)', '0'],
		['sin(3*pi/8)-cos(pi/8)', '0'],
		['(5*sqrt(5)-11)/2 + (11-5*sqrt(5))/2', '0'],
		['+3 - -2', '5']
	])('%s is exactly %s', (left, right) => {
		const [a, b] = [parseCoefficient(left), parseCoefficient(right)];
		expect(equalCoefficients(a, b)).toBe(true);
	});

	// Golden ratio, half angles and nested roots: true, but by no form that is kept here.
	it.each([
		['2*cos(pi/5)', '(1+sqrt(5))/2'],
		['2*pi/pi', '2'],
		['pi*sqrt(2)/(sqrt(2)*pi)', '1'],
		['2*cos(pi/8)', 'sqrt(2+sqrt(2))'],
		['sqrt(3+2*sqrt(2))', '1+sqrt(2)'],
		['cos(1)^2+sin(1)^2', '1'],
		['cos(pi/7)-cos(2*pi/7)+cos(3*pi/7)', '1/2'],
		['1/(sqrt(2)+sqrt(3)+pi)', '1/(pi+sqrt(3)+sqrt(2))'],
		['2*sqrt(sqrt(2))^2', '2*sqrt(2)']
	])('%s is %s within the errors they carry', (left, right) => {
		const [a, b] = [parseCoefficient(left), parseCoefficient(right)];
		const difference = Math.abs(a.value - b.value);
		expect(difference).toBeLessThanOrEqual(a.error + b.error);
		expect(Math.max(a.error, b.error)).toBeLessThan(1e-14);
	});
});

describe('what is no number', () => {
	it.each<[string, number | null, RegExp]>([
		['1 + 1e9999', 4, /exponent of 1e9999 is too large/],
		['2^(1/3)', 0, /exponent must be an integer/],
		['2^pi', 0, /exponent must be an integer/],
		['2^201', 0, /at most 200/],
		['1/(sqrt(2)*sqrt(3)-sqrt(6))', 0, /division by zero/],
		['1/(2*cos(pi/5)-(1+sqrt(5))/2)', 0, /told from zero/],
		['sqrt(2*cos(pi/5)-(1+sqrt(5))/2)', 5, /told from zero|negative number/],
		['sqrt(-2)', 6, /square root of a negative number/],
		['Sqrt(2)', 0, /Sqrt is not a number/],
		['PI', 0, /PI is not a number/],
		['2 sqrt', null, /needs parentheses|ends too early/],
		['sqrt(2', null, /ends too early/],
		['1 # 2', 2, /# has no meaning/],
		['1 \u20ac', 2, /this character has no meaning/],
		['3!', 1, /! has no meaning/],
		['2 ** 3', 3, /two operators/],
		['tan(1)', 0, /tan is not a number/],
		['()', null, /no number/],
		['cos(1)*cos(2)*cos(3)*cos(4)*cos(5)*cos(6)*cos(7)*cos(8)*cos(9)', 4, /too many/],
		['x', 0, /x is not a number/],
		['', 0, /missing/],
		['0/0', 0, /division by zero/],
		['9'.repeat(701), 0, /more than 500 characters/],
		[`10^200*10^200`, 0, /too many digits|too large/]
	])('%j', (text, position, message) => {
		let error: unknown = null;
		try {
			parseCoefficient(text);
		} catch (thrown) {
			error = thrown;
		}
		expect(String(error)).toMatch(message);
		expect(error).toMatchObject({ name: 'NotationError' });
		if (position !== null) expect(error).toMatchObject({ position });
	});
});
