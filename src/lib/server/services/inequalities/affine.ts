import { encloseCoefficient, type RationalInterval } from '../../../ledger/enclose-coefficient';
import {
	BOUND_PLACES,
	finiteDecimal,
	rationalOf,
	showBound,
	showEnclosure,
	showExact,
	type Side
} from '../../../ledger/figures';
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

/** Fractions up to this denominator are read at a glance, larger ones are not. */
const LARGEST_DENOMINATOR = 1000n;

/** A bound as a figure: `1/3` whole where no short decimal is, others rounded outward. */
export function showFigure(value: Rational, side: Side): string {
	const short = value.d <= LARGEST_DENOMINATOR && finiteDecimal(value, BOUND_PLACES) === null;
	return short ? value.toFraction() : showBound(value, side);
}

/** Both sides as figures with the digits that are known; one figure twice when it is exact. */
export function showSides({ lower, upper }: MappedSides): {
	lower: string | null;
	upper: string | null;
} {
	if (lower && upper && lower.equals(upper)) {
		return { lower: showFigure(lower, 'lower'), upper: showFigure(upper, 'upper') };
	}
	const shown = showEnclosure(lower, upper, 1);
	return { lower: shown.lower, upper: shown.upper };
}

export function exactText({ lower, upper }: MappedSides): string | null {
	return lower && upper && lower.equals(upper) ? showExact(lower) : null;
}
