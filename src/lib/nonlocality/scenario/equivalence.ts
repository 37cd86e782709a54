import {
	COEFFICIENT_ONE,
	COEFFICIENT_ZERO,
	addCoefficients,
	exactCoefficient,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from '../exact/coefficient';
import { ratio } from '../exact/rational';
import { equivalenceGraph } from './equivalence-graph';
import { dropUnused, sparseTerms, type UsedTerms } from './equivalence-terms';
import { WORK_LIMIT, canonicalLabelling } from './equivalence-search';
import { eventsKey, makeFunctional, type Functional, type Term } from './functional';
import { divide, integerForm } from './integer-form';
import { relabelFunctional } from './relabelling';
import { sha256 } from './sha256';
import { functionalOfZeroSumForm, zeroSumForm } from './zero-sum-form';

/** Changes whenever the digest of any functional does. */
export const DIGEST_VERSION = 2;

export interface CanonicalForm {
	/** Hexadecimal; equal for equivalent functionals. */
	readonly digest: string;
	readonly version: number;
	/** True when the coefficients' ratios are irrational: the digest then rests on 12 digits. */
	readonly numerical: boolean;
	/** The representative: zero-sum form without constant, integers with gcd 1 unless numerical. */
	readonly canonical: Functional;
	/** f is equivalent to scale * canonical + shift; scale > 0. */
	readonly scale: Coefficient;
	readonly shift: Coefficient;
	/**
	 * False when the search for the representative was cut short: the digest is then that of an
	 * invariant, which inequivalent functionals may share, and `canonical` is only equivalent to f.
	 */
	readonly complete: boolean;
}

/**
 * The representative of all functionals that become f, up to a positive scale and a constant, by
 * permuting parties, inputs and outputs and by the identities of normalisation and no-signalling.
 *
 * Inputs and parties on which f does not depend are dropped. A functional that is constant on all
 * behaviours has an empty canonical form (no parties, no terms), scale 1, and itself as the shift.
 * @param workLimit work of the search before it is cut short; the default is two or three seconds
 * @example canonicalForm(chsh).canonical // A0 B0 + A0 B1 + A1 B0 - A1 B1, up to relabelling
 */
export function canonicalForm(
	functional: Functional,
	workLimit: number = WORK_LIMIT
): CanonicalForm {
	const { shift, parts } = partsOf(functional);
	const version = DIGEST_VERSION;
	if (!parts) {
		const canonical = makeFunctional({ outputs: [] }, []);
		const digest = sha256(`${version} constant`);
		const scale = COEFFICIENT_ONE;
		return { digest, version, numerical: false, canonical, scale, shift, complete: true };
	}
	const { scale, numerical, used } = parts;
	const { relabelling, complete, invariant } = canonicalLabelling(
		equivalenceGraph(used.scenario, sparseTerms(used)),
		workLimit
	);
	const relabelled = (list: readonly Term[]) =>
		relabelFunctional(makeFunctional(used.scenario, list), relabelling);
	const canonical = relabelled(used.terms);
	const inDigits = () =>
		relabelled(used.terms.map((t) => ({ ...t, coefficient: exactCoefficient(ratio(t.integer)) })));
	const kind = `${numerical ? 'numerical' : 'exact'} ${complete ? 'form' : 'invariant'}`;
	const body = complete
		? printForm(numerical ? inDigits() : canonical)
		: printInvariant(used, invariant);
	const digest = sha256(`${version} ${kind} ${body}`);
	return { digest, version, numerical, canonical, scale, shift, complete };
}

/**
 * What equivalent functionals have in common, found without the search for a representative: two
 * that differ in it are not equivalent. It costs little for a functional of any size.
 */
export function looseForm(functional: Functional): string {
	const { parts } = partsOf(functional);
	if (!parts) return 'constant';
	const { numerical, used } = parts;
	const counts = (list: readonly number[]) => [...list].sort((a, b) => a - b).join(' ');
	const parties = used.scenario.outputs.map(counts).sort();
	// Of irrational coefficients a digit may differ, and an error may hide a zero.
	const integers = numerical ? [] : used.terms.map(({ integer }) => String(integer)).sort();
	return JSON.stringify([numerical, parties, integers]);
}

/** The constant, and what is left of the functional; null when nothing is. */
function partsOf(functional: Functional): {
	readonly shift: Coefficient;
	readonly parts: {
		readonly scale: Coefficient;
		readonly numerical: boolean;
		readonly used: UsedTerms;
	} | null;
} {
	const zeroSum = zeroSumForm(functional);
	const shift = zeroSum.constant;
	const whole = functionalOfZeroSumForm({ ...zeroSum, constant: COEFFICIENT_ZERO });
	const expanded = { ...whole, terms: whole.terms.filter(isKnownNonzero) };
	if (expanded.terms.length === 0) return { shift, parts: null };
	const form = integerForm(expanded.terms.map((term) => term.coefficient));
	const { scale, numerical } = form;
	const terms = expanded.terms.flatMap(({ events }, i) => {
		const integer = form.integers[i] ?? 0n;
		const coefficient = form.normalised[i];
		return integer === 0n || !coefficient ? [] : [{ events, integer, coefficient }];
	});
	return { shift, parts: { scale, numerical, used: dropUnused(expanded.scenario, terms) } };
}

/** Irrational forms count as the same only when they agree to this, beside the digest. */
const NUMERICAL_TOLERANCE = 1e-12;

/**
 * The affine map between two equivalent functionals: from = scale * to + shift, scale > 0, on
 * relabelled behaviours. Two constants differ by a shift. Null when they are not equivalent, or
 * when that could not be established (a canonical form is incomplete).
 */
export function affineMap(
	from: Functional,
	to: Functional
): { scale: Coefficient; shift: Coefficient } | null {
	const [a, b] = [canonicalForm(from), canonicalForm(to)];
	if (!agree(a, b)) return null;
	const scale = divide(a.scale, b.scale);
	const moved = negateCoefficient(multiplyCoefficients(scale, b.shift));
	return { scale, shift: addCoefficients(a.shift, moved) };
}

/** Whether two canonical forms are known to be the same, beyond their digests. */
export function agree(a: CanonicalForm, b: CanonicalForm): boolean {
	if (a.digest !== b.digest || !a.complete || !b.complete) return false;
	if (a.canonical.terms.length !== b.canonical.terms.length) return false;
	return a.canonical.terms.every((term, i) => {
		const other = b.canonical.terms[i];
		if (!other || eventsKey(term.events) !== eventsKey(other.events)) return false;
		const { coefficient: c } = term;
		const { coefficient: d } = other;
		if (c.exact && d.exact) return c.exact.equals(d.exact);
		return Math.abs(c.value - d.value) <= NUMERICAL_TOLERANCE;
	});
}

/** An irrational sum that cancels within its own error counts as zero. */
function isKnownNonzero({ coefficient: c }: Term): boolean {
	return c.exact !== null || Math.abs(c.value) > c.error;
}

function printForm({ scenario, terms }: Functional): string {
	const entries = terms.map((t) => `${eventsKey(t.events)}:${t.coefficient.text}`);
	return `${JSON.stringify(scenario.outputs)} ${entries.join(';')}`;
}

function printInvariant({ scenario, terms }: UsedTerms, invariant: string): string {
	const parties = scenario.outputs.map((counts) => [...counts].sort((a, b) => a - b).join('.'));
	const values = terms.map((term) => String(term.integer)).sort();
	return `${parties.sort().join('|')} ${values.join(',')} ${invariant}`;
}
