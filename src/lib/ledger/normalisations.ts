import {
	ONE,
	ZERO,
	exactOfDouble,
	parseRational,
	ratio,
	type Rational
} from '../nonlocality/exact/rational';
import { winningProbabilityMap, type CorrelatorGame } from './correlator-game';

/** Another way to write values of the same inequality: value there = scale * value here + shift. */
export interface Normalisation {
	/** Completes "in another normalisation, ...". */
	readonly name: string;
	readonly scale: Rational;
	readonly shift: Rational;
}

export interface NormalisationContext {
	/** The named family the claim's functional belongs to, with its parameter (n or d). */
	readonly family?: { readonly name: string; readonly parameter?: number } | null;
	/** Claimed value = scale * value of the family's own form + shift; left out, they are the same. */
	readonly fromFamily?: { readonly scale: Rational; readonly shift: Rational };
	/** `outputs[party][input]` of the claim's functional. */
	readonly outputs?: readonly (readonly number[])[];
	/** In the claim's normalisation, when it is known exactly. */
	readonly localMaximum?: Rational | null;
	/** For a sum of full correlators: the game it is. */
	readonly game?: CorrelatorGame | null;
}

const fraction = (numerator: number, denominator = 1): Rational =>
	ratio(BigInt(numerator), BigInt(denominator));

const form = (name: string, scale: Rational, shift: Rational): Normalisation => ({
	name,
	scale,
	shift
});

function gameForm(game: CorrelatorGame): Normalisation {
	const { scale, shift } = winningProbabilityMap(game);
	return form('as the winning probability of the game', scale, shift);
}

const winningProbability = (weight: Rational) => gameForm({ weight, constant: ZERO });

/** Forms in which a family's values are published, from its own form (problem format). */
function familyForms(name: string, parameter: number | undefined): Normalisation[] {
	const own = (label: string) => form(label, ONE, ZERO);
	switch (name) {
		case 'chsh':
			return [
				own('as CHSH'),
				form('as CH, where CHSH = 4 CH + 2', fraction(1, 4), fraction(-1, 2)),
				winningProbability(fraction(4))
			];
		case 'i3322':
			return [
				own('in probabilities, with local maximum 0'),
				form('in correlators, 4 I + 4', fraction(4), fraction(4))
			];
		case 'cglmp':
			return parameter === undefined || parameter < 2 ? [] : cglmpForms(parameter);
		case 'chained':
			return parameter === undefined
				? []
				: [
						own('as a sum of correlators'),
						winningProbability(fraction(2 * parameter)),
						form(`with quantum maximum ${parameter}`, chainedShare(parameter), ZERO)
					];
		case 'elegant':
			return [own('as a sum of correlators'), winningProbability(fraction(12))];
		case 'mermin':
			return parameter === undefined
				? []
				: [own('as a sum of correlators'), winningProbability(fraction(2 ** (parameter - 1)))];
		case 'svetlichny':
			return parameter === undefined
				? []
				: [own('as a sum of correlators'), winningProbability(fraction(2 ** parameter))];
		default:
			return [];
	}
}

/** The form with d outputs and m inputs of Phys. Rev. Lett. 119, 040402 (2017), at d = 2. */
const chainedShare = (n: number) => exactOfDouble(1 / (2 * Math.cos(Math.PI / (2 * n))));

/** I_d = 2 + (2d/(d-1)) (1 - B): the complementary form falls where I_d rises. */
function cglmpForms(d: number): Normalisation[] {
	const share = fraction(d - 1, 2 * d);
	const twice = share.mul(2);
	return [
		form(`as I_${d}, with local maximum 2`, ONE, ZERO),
		form(`as B, where I_${d} = 2 + (${2 * d}/${d - 1}) (1 - B)`, share.neg(), ONE.add(twice)),
		form('with local maximum 0, as 1 - B', share, twice.neg())
	];
}

/** Conversions of the smallest two-party scenarios, for a functional that has no known name. */
function scenarioForms(outputs: NormalisationContext['outputs']): Normalisation[] {
	const inputs = outputs?.length === 2 && outputs.flat().every((count) => count === 2);
	if (!inputs) return [];
	const shape = outputs.map((party) => party.length).join();
	if (shape === '2,2')
		return [
			form('as CHSH = 4 CH + 2', fraction(4), fraction(2)),
			form('as CH = (CHSH - 2)/4', fraction(1, 4), fraction(-1, 2)),
			form('as the winning probability 1/2 + S/8', fraction(1, 8), fraction(1, 2))
		];
	if (shape === '3,3')
		return [
			form('in correlators, 4 I + 4', fraction(4), fraction(4)),
			form('in probabilities, I = (value - 4)/4', fraction(1, 4), fraction(-1))
		];
	return [];
}

/** The affine maps worth trying when a claimed value disagrees; the claim's own form is left out. */
export function knownNormalisations(context: NormalisationContext): readonly Normalisation[] {
	const { family, fromFamily, localMaximum, game } = context;
	const named = family ? familyForms(family.name, family.parameter) : [];
	const scale = fromFamily?.scale ?? ONE;
	const shift = fromFamily?.shift ?? ZERO;
	// there = a * own + b, and own = (here - shift) / scale
	const candidates = named.map(({ name, scale: a, shift: b }) =>
		form(name, a.div(scale), b.sub(a.mul(shift).div(scale)))
	);
	if (named.length === 0) candidates.push(...scenarioForms(context.outputs));
	if (game) candidates.push(gameForm(game));
	if (localMaximum && localMaximum.n > 0n) {
		candidates.push(form('with the local maximum subtracted', ONE, localMaximum.neg()));
		if (localMaximum.s > 0n)
			candidates.push(form('as a multiple of the local maximum', ONE.div(localMaximum), ZERO));
	}
	return distinct(candidates);
}

function distinct(candidates: readonly Normalisation[]): Normalisation[] {
	const kept: Normalisation[] = [];
	for (const candidate of candidates) {
		if (candidate.scale.equals(ONE) && candidate.shift.equals(ZERO)) continue;
		const known = kept.some(
			(k) => k.scale.equals(candidate.scale) && k.shift.equals(candidate.shift)
		);
		if (!known) kept.push(candidate);
	}
	return kept;
}

/** A family's parameter as the normalisations use it: n or d, whichever it has. */
export function familyParameter(parameters: Readonly<Record<string, unknown>>): number | undefined {
	for (const key of ['d', 'n']) {
		const value = parameters[key];
		const read = typeof value === 'string' ? parseRational(value)?.valueOf() : value;
		if (typeof read === 'number' && Number.isSafeInteger(read)) return read;
	}
	return undefined;
}
