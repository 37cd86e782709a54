import { expect, it } from 'vitest';
import { sparseFunctional } from '../../../../tests/factories/random-functional';
import { everyRelabelling } from '../../../../tests/factories/every-relabelling';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { canonicalForm } from './equivalence';
import { collinsGisinForm, eventsKey, type Functional } from './functional';
import { relabelFunctional, type Relabelling } from './relabelling';

/**
 * The least text among all relabellings of the Collins-Gisin coordinates without the constant,
 * scaled by their greatest common divisor: a representative of the class by its definition alone,
 * for a functional that depends on every input.
 */
function leastText(f: Functional, relabellings: readonly Relabelling[]): string {
	const texts = relabellings.map((relabelling) => {
		const { terms } = collinsGisinForm(relabelFunctional(f, relabelling));
		const rest = terms.filter(({ events }) => events.length > 0);
		const values = rest.map(({ coefficient }) => coefficient.value);
		const divisor = values.reduce((a, b) => gcd(Math.abs(a), Math.abs(b)), 0);
		return rest.map(({ events }, i) => `${eventsKey(events)}:${(values[i] ?? 0) / divisor}`).join();
	});
	return texts.reduce((a, b) => (b < a ? b : a));
}

const gcd = (a: number, b: number): number => (b === 0 ? a : gcd(b, a % b));

it.each<[number, number, number, number]>([
	[2, 2, 2, 250],
	[1, 2, 4, 100],
	[3, 1, 3, 40],
	[2, 1, 4, 60]
])(
	'sorts functionals of %i parties, %i inputs, %i outputs into classes as trying all relabellings does',
	(parties, inputs, outputs, count) => {
		const relabellings = everyRelabelling(parties, inputs, outputs);
		const shape = Array.from({ length: parties }, () =>
			Array.from({ length: inputs }, () => outputs)
		);
		const random = lehmer(29);
		const textOf = new Map<string, string>();
		const digestOf = new Map<string, string>();
		for (let drawn = 0; drawn < count; drawn++) {
			const f = sparseFunctional(shape, 2 + random(6), random);
			const { digest, canonical } = canonicalForm(f);
			if (JSON.stringify(canonical.scenario.outputs) !== JSON.stringify(shape)) continue;
			const text = leastText(f, relabellings);
			expect(textOf.get(digest) ?? text).toBe(text);
			expect(digestOf.get(text) ?? digest).toBe(digest);
			textOf.set(digest, text);
			digestOf.set(text, digest);
		}
		expect(textOf.size).toBeGreaterThan(4);
	}
);
