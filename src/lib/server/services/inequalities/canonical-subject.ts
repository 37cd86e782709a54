import { createHash } from 'node:crypto';
import { parseCoefficient } from '../../../nonlocality/exact/expression';
import { canonicalForm } from '../../../nonlocality/scenario/equivalence';
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

export function canonicalSubject(functional: Functional): CanonicalSubject {
	const { outputs } = functional.scenario;
	const text = JSON.stringify([outputs, termsOfFunctional(functional)]);
	const key = createHash('sha256').update(text).digest('base64');
	return cache.get(key) ?? cache.keep(key, search(functional));
}

function search(functional: Functional): CanonicalSubject {
	const { digest, version, numerical, scale, shift, complete } = canonicalForm(functional);
	return {
		// An invariant may be shared by inequivalent functionals: those then stay apart.
		digest: complete ? digest : `${digest}-${ownDigest(functional)}`,
		version,
		numerical,
		scale: scale.text,
		shift: shift.text
	};
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
