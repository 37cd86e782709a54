import { ONE, ZERO, parseRational, ratio, type Rational } from '../nonlocality/exact/rational';
import type { Diagnosis, DiagnosisKind } from './diagnosis';
import { MINUS_ONE, endsOf, mapReading, type Trial } from './diagnosis-trial';
import { insertedDigits, replacedDigits, swappedDigits } from './digit-slips';
import type { Ends } from './printed-like';
import { StatedValueError, readStatedValue, type StatedValue } from './stated-value';

/** Quantities measured in bits, for which a paper may have used the natural logarithm. */
const IN_BITS: ReadonlySet<string> = new Set([
	'min-entropy',
	'key-rate',
	'information-causality-test'
]);

/** ln 2 to 30 decimals. */
const LN2: Rational = parseRational('0.693147180559945309417232121458') ?? ratio(7n, 10n);

export function percent(trial: Trial): Diagnosis[] {
	const { printed, decimal, percent: isPercent } = trial.reading;
	if (!decimal) return [];
	const other = isPercent ? printed.replace(/\\?[%％]/g, '') : `${printed.trimEnd()} %`;
	const text = isPercent ? 'the percent sign is not meant' : 'it is meant in percent';
	return reread(trial, 'percent', [other.trim()], (value) => `${text}: ${value}`);
}

export function complement(trial: Trial): Diagnosis[] {
	const changed = mapReading(trial.reading, MINUS_ONE, ONE);
	if (!trial.agrees(changed)) return [];
	const value = trial.print(endsOf(changed));
	const text = `the paper gives the complement: 1 - ${trial.reading.printed.trim()} = ${value}`;
	return [trial.make('complement', value, text)];
}

export function sign(trial: Trial): Diagnosis[] {
	const changed = mapReading(trial.reading, MINUS_ONE, ZERO);
	if (trial.reading.value.n === 0n || !trial.agrees(changed)) return [];
	const value = trial.print(endsOf(changed));
	return [trial.make('sign', value, `the sign is the other way round: ${value}`)];
}

export function logarithmBase(trial: Trial, quantity: string): Diagnosis[] {
	if (!IN_BITS.has(quantity)) return [];
	const tries: readonly (readonly [Rational, string])[] = [
		[ONE.div(LN2), 'the paper counts in nats, by the natural logarithm: divided by ln 2 it is'],
		[LN2, 'the value was turned from nats into bits once too often: times ln 2 it is']
	];
	return tries.flatMap(([scale, text]) => {
		const changed = mapReading(trial.reading, scale, ZERO);
		if (!trial.agrees(changed)) return [];
		const value = trial.print(endsOf(changed));
		return [trial.make('logarithm-base', value, `${text} ${value} bits`)];
	});
}

/** Slips of the pen, the best of each kind. */
export function slips(trial: Trial): Diagnosis[] {
	const { printed, decimal } = trial.reading;
	if (!decimal) return [];
	const kinds: readonly (readonly [DiagnosisKind, readonly string[], string])[] = [
		['digits-swapped', swappedDigits(printed, decimal), 'two neighbouring digits changed places'],
		['digit-missing', insertedDigits(printed, decimal), 'a digit is missing'],
		['digit-mistyped', replacedDigits(printed, decimal), 'one digit is mistyped']
	];
	return kinds.flatMap(([kind, candidates, text]) =>
		reread(trial, kind, candidates, (value) => `${text}: ${value}`)
	);
}

/** Of changed printings, the one that agrees and lies nearest to what was computed. */
function reread(
	trial: Trial,
	kind: DiagnosisKind,
	candidates: readonly string[],
	text: (value: string) => string
): Diagnosis[] {
	let best: { readonly value: string; readonly off: Rational } | null = null;
	for (const printed of candidates) {
		const reading = readOrNull(printed, trial.reading);
		if (!reading || !trial.agrees(reading)) continue;
		const off = reading.value.sub(middleOf(trial.enclosure) ?? reading.value).abs();
		if (!best || off.compare(best.off) < 0) best = { value: printed.trim(), off };
	}
	return best ? [trial.make(kind, best.value, text(best.value))] : [];
}

function middleOf({ lower, upper }: Ends): Rational | null {
	return lower && upper ? lower.add(upper).div(2) : (lower ?? upper);
}

function readOrNull(printed: string, { choice }: StatedValue): StatedValue | null {
	try {
		return readStatedValue(printed, choice);
	} catch (error) {
		if (error instanceof StatedValueError) return null;
		throw error;
	}
}
