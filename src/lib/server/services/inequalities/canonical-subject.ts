import { createHash } from 'node:crypto';
import { canonicalPlace, type CanonicalPlace } from '../../../nonlocality/scenario/canonical-place';
import { parseCoefficient } from '../../../nonlocality/exact/expression';
import { collinsGisinForm, type Functional } from '../../../nonlocality/scenario/functional';
import { termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import { Recent } from '../../recent';

/** value of a functional = scale * value of the canonical form + shift; coefficients as text. */
export interface MapText {
	readonly scale: string;
	readonly shift: string;
}

/** Where a functional belongs, worked out before any transaction: the search may take a while. */
export interface CanonicalSubject extends MapText {
	readonly digest: string;
	readonly version: number;
	readonly numerical: boolean;
}

/** A form is read again at every pause in typing, mostly with the same subject in it. */
const cache = new Recent<CanonicalSubject>(200);

function keyOf(functional: Functional): string {
	const text = JSON.stringify([functional.scenario.outputs, termsOfFunctional(functional)]);
	return createHash('sha256').update(text).digest('base64');
}

/** Where it belongs, when that was worked out lately. */
export const knownPlace = (functional: Functional) => cache.get(keyOf(functional));

export function keepPlace(functional: Functional, place: CanonicalPlace): CanonicalSubject {
	const { digest, version, numerical, scale, shift, complete } = place;
	return cache.keep(keyOf(functional), {
		// An invariant may be shared by inequivalent functionals: those then stay apart.
		digest: complete ? digest : `${digest}-${ownDigest(functional)}`,
		version,
		numerical,
		scale,
		shift
	});
}

/**
 * The same in this thread: for the forms of small families only. What a person wrote goes through
 * `placeSubject`.
 */
export function canonicalSubject(functional: Functional): CanonicalSubject {
	const { outputs } = functional.scenario;
	return (
		knownPlace(functional) ??
		keepPlace(functional, canonicalPlace({ outputs, terms: termsOfFunctional(functional) }))
	);
}

function ownDigest(functional: Functional): string {
	const text = JSON.stringify(termsOfFunctional(collinsGisinForm(functional)));
	return createHash('sha256').update(text).digest('hex').slice(0, 16);
}

/** The map from `from` to `to` when both are given over the same canonical form. */
export function mapBetween(from: MapText, to: MapText): MapText {
	const scale = parseCoefficient(`(${to.scale})/(${from.scale})`).text;
	const shift = parseCoefficient(`(${to.shift})-(${scale})*(${from.shift})`).text;
	return { scale, shift };
}

export const isIdentity = ({ scale, shift }: MapText) => scale === '1' && shift === '0';
