import { encloseCoefficient, type RationalInterval } from '../../../ledger/enclose-coefficient';
import { rationalOf, showBound, showEnclosure, showExact } from '../../../ledger/figures';
import { parseCoefficient } from '../../../nonlocality/exact/expression';
import { parseRational, type Rational } from '../../../nonlocality/exact/rational';

/** value in another normalisation = scale * value + shift, scale positive; as enclosed rationals. */
export interface AffineMap {
	readonly scale: RationalInterval;
	readonly shift: RationalInterval;
}

export const IDENTITY_TEXT = { scale: '1', shift: '0' } as const;

export function readMap(text: { readonly scale: string; readonly shift: string }): AffineMap {
	return {
		scale: encloseCoefficient(parseCoefficient(text.scale)),
		shift: encloseCoefficient(parseCoefficient(text.shift))
	};
}

/** The mapped value's safe end: never tighter than what was given. */
export function mapSide(map: AffineMap, value: Rational, side: 'lower' | 'upper'): Rational {
	const products = [map.scale.low.mul(value), map.scale.high.mul(value)] as const;
	const [a, b] = products;
	const smaller = a.compare(b) < 0 ? a : b;
	const larger = a.compare(b) < 0 ? b : a;
	return side === 'lower' ? smaller.add(map.shift.low) : larger.add(map.shift.high);
}

/** A computed value with both sides; exact where they coincide. */
export interface Sides {
	readonly lower: number | null;
	readonly upper: number | null;
	readonly exact: string | null;
}

export interface MappedSides {
	readonly lower: Rational | null;
	readonly upper: Rational | null;
}

export function mapSides(map: AffineMap, { lower, upper, exact }: Sides): MappedSides {
	const known = exact === null ? null : parseRational(exact);
	const low = known ?? (lower === null ? null : rationalOf(lower));
	const high = known ?? (upper === null ? null : rationalOf(upper));
	return {
		lower: low && mapSide(map, low, 'lower'),
		upper: high && mapSide(map, high, 'upper')
	};
}

/** Both sides as figures with the digits that are known; one figure twice when it is exact. */
export function showSides({ lower, upper }: MappedSides): {
	lower: string | null;
	upper: string | null;
} {
	if (lower && upper && lower.equals(upper)) {
		return { lower: showBound(lower, 'lower'), upper: showBound(upper, 'upper') };
	}
	const shown = showEnclosure(lower, upper, 1);
	return { lower: shown.lower, upper: shown.upper };
}

export function exactText({ lower, upper }: MappedSides): string | null {
	return lower && upper && lower.equals(upper) ? showExact(lower) : null;
}
