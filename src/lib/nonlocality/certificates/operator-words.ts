/**
 * Words in projectors, for the checks alone: written apart from the solver's, and by another rule
 * (rewriting until nothing changes), so that a defect in one does not hide in the other.
 */
import type { Level } from '../problem';
import type { Event, Scenario } from '../scenario/scenario';
import type { Monomial } from './types';

type Letters = Monomial[number];

/** Past this many words a level is not rebuilt: the check would take minutes. */
export const MOST_CHECKED_WORDS = 1000;

function printLetters(letters: Letters): string {
	return letters.map(([input, output]) => `${input}.${output}`).join(' ');
}

export function nameOf(word: Monomial): string {
	return word.map(printLetters).join(' | ');
}

/** E E = E and E E' = 0 for two outputs of one input; null when the word vanishes. */
function rewrite(letters: Letters): Letters | null {
	for (let i = 0; i + 1 < letters.length; i++) {
		const here = letters[i];
		const next = letters[i + 1];
		if (!here || !next || here[0] !== next[0]) continue;
		if (here[1] !== next[1]) return null;
		return rewrite([...letters.slice(0, i), ...letters.slice(i + 1)]);
	}
	return letters;
}

export function isReduced(word: Monomial): boolean {
	return word.every((letters) => rewrite(letters)?.length === letters.length);
}

export function adjoint(word: Monomial): Monomial {
	return word.map((letters) => [...letters].reverse());
}

/**
 * The name of the moment <left^dagger right>, the same for a word and its adjoint (only real parts
 * enter); null when the product vanishes.
 */
export function momentName(left: Monomial, right: Monomial): string | null {
	const product: Letters[] = [];
	for (const [party, letters] of adjoint(left).entries()) {
		const reduced = rewrite([...letters, ...(right[party] ?? [])]);
		if (!reduced) return null;
		product.push(reduced);
	}
	const names = [nameOf(product), nameOf(adjoint(product))].sort();
	return names[0] ?? null;
}

export function wordOf(scenario: Scenario, events: readonly Event[]): Monomial {
	return scenario.outputs.map((_, party) =>
		events
			.filter((event) => event[0] === party)
			.map(([, input, output]) => [input, output] as const)
	);
}

/** Whether a word with these numbers of letters, or one that extends it, belongs to a level. */
function shapeRule(scenario: Scenario, level: Level) {
	const parties = scenario.outputs.length;
	if (typeof level === 'number') {
		const within = (shape: readonly number[]) => shape.reduce((a, b) => a + b, 0) <= level;
		return { belongs: within, leads: within };
	}
	if (level === '1+AB' || 'perParty' in level) {
		const most = level === '1+AB' ? 1 : level.perParty;
		const within = (shape: readonly number[]) =>
			(level !== '1+AB' || parties === 2) && shape.every((count) => count <= most);
		return { belongs: within, leads: within };
	}
	const listed = ['', ...level.products].map((product) =>
		scenario.outputs.map(
			(_, party) => [...product].filter((c) => c === String.fromCharCode(65 + party)).length
		)
	);
	return {
		belongs: (shape: readonly number[]) =>
			listed.some((other) => other.every((count, party) => count === shape[party])),
		leads: (shape: readonly number[]) =>
			listed.some((other) => other.every((count, party) => count >= (shape[party] ?? 0)))
	};
}

/** Names of all monomials of a level, grown from the identity; null past MOST_CHECKED_WORDS. */
export function levelNames(scenario: Scenario, level: Level): ReadonlySet<string> | null {
	const { belongs, leads } = shapeRule(scenario, level);
	const shapeOf = (word: Monomial) => word.map((letters) => letters.length);
	const identity: Monomial = scenario.outputs.map(() => []);
	const seen = new Map([[nameOf(identity), identity]]);
	const names = new Set<string>();
	for (const word of seen.values()) {
		if (belongs(shapeOf(word))) names.add(nameOf(word));
		for (const [party, counts] of scenario.outputs.entries()) {
			for (const [input, count] of counts.entries()) {
				for (let output = 0; output < count - 1; output++) {
					const longer = [[input, output] as const, ...(word[party] ?? [])];
					const next = word.with(party, longer);
					if (rewrite(longer)?.length === longer.length && leads(shapeOf(next)))
						seen.set(nameOf(next), next);
				}
			}
		}
		if (seen.size > 20 * MOST_CHECKED_WORDS || names.size > MOST_CHECKED_WORDS) return null;
	}
	return names;
}

/** Every word but the identity has a party whose left-most operator can go and leave a listed word. */
export function isClosed(words: readonly Monomial[], names: ReadonlySet<string>): boolean {
	return words.every(
		(word) =>
			word.every((letters) => letters.length === 0) ||
			word.some(
				(letters, party) =>
					letters.length > 0 && names.has(nameOf(word.with(party, letters.slice(1))))
			)
	);
}
