import { printRational, toDecimal, type Rational } from '../nonlocality/exact/rational';
import type { Relation } from './claim';
import type { Diagnosis, OtherValue } from './diagnosis';
import { mapEnds, settles, type Trial } from './diagnosis-trial';
import { distanceTo, withinSolverTolerance } from './judgement';
import type { Normalisation } from './normalisations';
import { knownValue } from './printed-like';
import { showAtMost } from './reasons';

const OPPOSITE: Readonly<Record<Relation, Relation>> = { '=': '=', '<=': '>=', '>=': '<=' };

export function solverTolerance(trial: Trial): Diagnosis[] {
	const { reading, relation, enclosure } = trial;
	const distance = distanceTo(reading, relation, enclosure);
	if (!distance || !withinSolverTolerance(reading, distance)) return [];
	const value = knownValue(enclosure, reading);
	const read = trial.cut ? 'cut off, not rounded, ' : '';
	const text = `the last digits are not counted: ${read}it misses ${value} by at most ${showAtMost(distance)} beyond the printed precision, within usual solver tolerance`;
	return [trial.make('solver-tolerance', value, text)];
}

/** Values of other quantities; of a bound (`<=`, `>=`) too, only the one it would be tight for. */
export function otherQuantities(trial: Trial, others: readonly OtherValue[]): Diagnosis[] {
	const matching = others.filter((other) => other.matchesMethod);
	const rest = others.filter((other) => !other.matchesMethod);
	return [...matching, ...rest]
		.filter((other) => settles(trial.reading, '=', other))
		.map((other) => ({
			...trial.make(
				'other-quantity',
				trial.print(other),
				`the paper meant ${other.label}, ${trial.which(other)}`
			),
			quantity: other.quantity,
			fields: other.fields
		}));
}

export function otherNormalisations(
	trial: Trial,
	normalisations: readonly Normalisation[]
): Diagnosis[] {
	const { reading, enclosure } = trial;
	return normalisations.flatMap(({ name, scale, shift }) => {
		const mapped = mapEnds(enclosure, scale, shift);
		if (!settles(reading, '=', mapped)) return [];
		const sum = `${showProduct(scale, knownValue(enclosure, reading))}${showShift(shift)}`;
		const text = `the paper gives it ${name}: ${sum} = ${knownValue(mapped, reading)}${trial.asPrinted(mapped)}`;
		return [
			{
				...trial.make('other-normalisation', trial.print(mapped), text),
				name,
				scale: printRational(scale),
				shift: printRational(shift)
			}
		];
	});
}

function showProduct(scale: Rational, value: string): string {
	if (scale.equals(1)) return value;
	return `${shortRational(scale)} × ${value.startsWith('-') ? `(${value})` : value}`;
}

/** A scale that is no short fraction (an irrational one, enclosed) is shown to 9 digits. */
function shortRational(scale: Rational): string {
	const whole = printRational(scale);
	return whole.length <= 12 ? whole : `${toDecimal(scale, 9, scale.s < 0n ? 'up' : 'down')}…`;
}

function showShift(shift: Rational): string {
	if (shift.n === 0n) return '';
	return ` ${shift.s < 0n ? '-' : '+'} ${printRational(shift.abs())}`;
}

/** For a trial whose reading is the truncated one. */
export function truncated(trial: Trial): Diagnosis[] {
	const { reading, relation, enclosure } = trial;
	if (!trial.agrees(reading, relation)) return [];
	const text = `the digits were cut off, not rounded: ${knownValue(enclosure, reading)}${trial.asPrinted(enclosure)}`;
	return [trial.make('truncated', trial.print(enclosure), text)];
}

/** The other way round, for a trial whose reading is the rounded one. */
export function roundedInstead(trial: Trial): Diagnosis[] {
	const { reading, relation, enclosure } = trial;
	if (!settles(reading, relation, enclosure)) return [];
	const text = `the digits were rounded, not cut off: ${knownValue(enclosure, reading)}${trial.asPrinted(enclosure)}`;
	return [trial.make('truncated', trial.print(enclosure), text)];
}

export function indexBase(trial: Trial, other: OtherValue | null | undefined): Diagnosis[] {
	if (!other || !settles(trial.reading, '=', other)) return [];
	const text = `the indices are counted from the other base: ${other.label}, ${trial.which(other)}`;
	return [trial.make('index-base', trial.print(other), text)];
}

export function relationReversed(trial: Trial): Diagnosis[] {
	const { reading, relation } = trial;
	if (relation === '=' || !trial.agrees(reading, OPPOSITE[relation])) return [];
	const words = relation === '<=' ? 'at least' : 'at most';
	const printed = reading.printed.trim().replace(/^(?:[<>]=?|[≤≥=])\s*/, '');
	const text = `the relation is meant the other way: ${words} ${printed}`;
	return [trial.make('relation-reversed', printed, text)];
}
