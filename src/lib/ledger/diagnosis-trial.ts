import { ONE, type Rational } from '../nonlocality/exact/rational';
import { acceptedSet, fitOf, type ReadInterval } from './accepted-set';
import type { Relation } from './claim';
import type { Diagnosis, DiagnosisKind } from './diagnosis';
import { withMinusSign } from './figures';
import { distanceTo } from './judgement';
import { knownValue, printLike, type Ends } from './printed-like';
import type { StatedValue } from './stated-value';

/**
 * Where an enclosure is wider than the printed precision, a change of the claim explains it only if
 * it moves the value by this many widths; otherwise almost any change is consistent.
 */
const TELLING_CHANGE = 10;

/** A claim under trial: its reading, and what was computed of the quantity it is about. */
export class Trial {
	constructor(
		readonly reading: StatedValue,
		readonly relation: Relation,
		readonly enclosure: Ends,
		/** The reading is the truncated one, tried in place of the rounded. */
		readonly cut = false
	) {}

	/** Whether a changed claim would agree with what was computed, or at least be consistent with it. */
	agrees(changed: ReadInterval, relation: Relation = '='): boolean {
		if (settles(changed, relation, this.enclosure)) return true;
		const { lower, upper } = this.enclosure;
		if (!lower || !upper || distanceTo(changed, relation, this.enclosure)) return false;
		const width = upper.sub(lower);
		const change = changed.value.sub(this.reading.value).abs();
		const wider = width.compare(changed.high.sub(changed.low)) > 0;
		return wider && width.mul(TELLING_CHANGE).compare(change) < 0;
	}

	/** `which is 0.2514709, printed 0.2515`. */
	which(ends: Ends): string {
		const exact = ends.lower !== null && ends.upper !== null && ends.lower.equals(ends.upper);
		return `which is ${exact ? 'exactly ' : ''}${knownValue(ends, this.reading)}${this.asPrinted(ends)}`;
	}

	/** `, printed 0.2515`; nothing where the value itself says so already. */
	asPrinted(ends: Ends): string {
		if (this.reading.precision === null) return '';
		const printed = this.print(ends);
		if (printed === knownValue(ends, this.reading)) return '';
		return this.cut ? `, cut off to ${printed}` : `, printed ${printed}`;
	}

	print(ends: Ends): string {
		return printLike(ends, this.reading, this.cut);
	}

	make(kind: DiagnosisKind, value: string, text: string): Diagnosis {
		const found = { kind, value, text: withMinusSign(text) };
		return this.cut && kind !== 'truncated' ? { ...found, truncated: true } : found;
	}
}

/** Whether a claim of this reading agrees with a value known to lie between these ends. */
export function settles(reading: ReadInterval, relation: Relation, ends: Ends): boolean {
	const { lower, upper } = ends;
	const exact = lower !== null && upper !== null && lower.equals(upper);
	return fitOf(acceptedSet(reading, relation, exact), ends) === 'inside';
}

export function mapEnds({ lower, upper }: Ends, scale: Rational, shift: Rational): Ends {
	const map = (x: Rational | null) => x && x.mul(scale).add(shift);
	return scale.s < 0n
		? { lower: map(upper), upper: map(lower) }
		: { lower: map(lower), upper: map(upper) };
}

export function mapReading(reading: StatedValue, scale: Rational, shift: Rational): ReadInterval {
	const ends = mapEnds(endsOf(reading), scale, shift);
	return {
		low: ends.lower ?? reading.low,
		high: ends.upper ?? reading.high,
		value: reading.value.mul(scale).add(shift),
		exact: reading.exact,
		irrational: reading.irrational
	};
}

export const endsOf = ({ low, high }: ReadInterval): Ends => ({ lower: low, upper: high });

export const MINUS_ONE: Rational = ONE.neg();
