import { describe, expect, it } from 'vitest';
import { claimInput, type ClaimInput } from '../../../schemas/claim-input';
import { isOfInequality, quantityKey, type KeyedClaim } from './quantity-key';

const keyed = (over: Partial<ClaimInput> = {}, columns: Partial<KeyedClaim> = {}): KeyedClaim => ({
	input: claimInput.parse({ quantity: 'npa', level: '2', printed: '2.8284', ...over }),
	inequalityId: 'chsh',
	scale: '1',
	shift: '0',
	subject: 'A0 B0 + A0 B1 + A1 B0 - A1 B1',
	...columns
});
const key = (over: Partial<ClaimInput> = {}, columns: Partial<KeyedClaim> = {}) =>
	quantityKey(keyed(over, columns));

describe('what a claim is about', () => {
	it.each<[string, Partial<ClaimInput>, Partial<KeyedClaim>]>([
		['the value', { printed: '2.83', reading: 'truncated' }, {}],
		['the relation', { relation: '<=' }, {}],
		['paper, locator and note', { locator: 'eq. (9)', note: 'see there', method: 'SDP' }, {}],
		['how the level is typed', { level: ' 2 ' }, {}],
		['how the inequality is written', { expression: 'A0B0 + ...' }, { subject: 'A0B0 + ...' }],
		['a parameter of another quantity', { dimension: '3' }, {}]
	])('does not change with %s', (_, over, columns) => {
		expect(key(over, columns)).toBe(key());
	});

	it.each<[string, Partial<ClaimInput>, Partial<KeyedClaim>]>([
		['the quantity', { quantity: 'quantum' }, {}],
		['the level', { level: '3' }, {}],
		['non-negative probabilities', { nonNegative: true }, {}],
		['the sense', { sense: 'min' }, {}],
		['the inequality', {}, { inequalityId: 'i3322' }],
		['the normalisation', {}, { scale: '1/4', shift: '-1/2' }]
	])('changes with %s', (_, over, columns) => {
		expect(key(over, columns)).not.toBe(key());
	});

	it('given in words is its words, however they are spaced', () => {
		const words = (subject: string) =>
			key({ quantity: 'visibility' }, { inequalityId: null, subject });
		expect(words('two  qubits\n')).toBe(words('two qubits'));
		expect(words('two qubits')).not.toBe(words('three qubits'));
	});

	it('tells a key of the same inequality, whatever the quantity', () => {
		expect(isOfInequality(key({ quantity: 'local' }), keyed())).toBe(true);
		expect(isOfInequality(key({}, { inequalityId: 'i3322' }), keyed())).toBe(false);
		expect(isOfInequality(key({}, { inequalityId: null }), keyed())).toBe(false);
	});
});
