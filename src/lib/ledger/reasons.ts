import { toDecimal, type Rational } from '../nonlocality/exact/rational';
import { sizeOf, type ReadInterval } from './accepted-set';
import type { Relation } from './claim';
import { isExact, type Enclosure } from './enclosure';
import {
	finiteDecimal,
	placesOfGap,
	rationalOf,
	showEnclosure,
	showExact,
	withMinusSign
} from './figures';
import { isNamedReproduction } from './reproductions';
import { LONGEST_PRINTED } from './stated-value';
import { NO_SOLVER, distanceTo, type Judgement, type RecomputationState } from './judgement';

export interface ReasonInput {
	readonly reading: ReadInterval;
	readonly relation: Relation;
	readonly recomputation: RecomputationState;
	/** `Quantum maximum`, as the claim's quantity is labelled. */
	readonly quantity?: string;
}

/** A positive distance with one digit, rounded down. */
export function showAtLeast(distance: Rational): string {
	return toDecimal(distance, Math.max(0, placesOfGap(distance)), 'down');
}

/** `more than 0.0005`, or `2` when it is exactly that. */
function showMoreThan(distance: Rational): string {
	const shown = showAtLeast(distance);
	return rationalOf(shown).equals(distance) ? shown : `more than ${shown}`;
}

/** A positive distance with one digit, rounded up: what it is at most. */
export function showAtMost(distance: Rational): string {
	return toDecimal(distance, Math.max(0, placesOfGap(distance)), 'up');
}

/** `the quantum maximum`; an abbreviation keeps its capitals. */
function inSentence(quantity: string | undefined): string {
	if (!quantity) return 'the quantity';
	const keep = /^[A-Z][A-Z0-9]/.test(quantity);
	return `the ${keep ? quantity : quantity.charAt(0).toLowerCase() + quantity.slice(1)}`;
}

/** Why the claim stands as it does, in a sentence or two, numbers rounded outward. */
export function reasonFor(judgement: Judgement, input: ReasonInput): string {
	const sentences = [mainSentence(judgement, input)];
	if (judgement.contradicting.length > 0)
		sentences.push('A reproduction by a person contradicts the certificate.');
	if (judgement.disputed && judgement.status === 'open')
		sentences.push('Accepted reproductions contradict each other, so none of them counts.');
	return withMinusSign(sentences.join(' '));
}

function mainSentence({ reasonCode, enclosure }: Judgement, input: ReasonInput): string {
	const { recomputation } = input;
	switch (reasonCode) {
		case 'contradictory':
			return 'Our recomputations contradict each other; this is a defect of ours and has been reported.';
		case 'not-run':
			return `Not recomputed yet.${knownSoFar(enclosure)}`;
		case 'running':
			return `The recomputation is running.${knownSoFar(enclosure)}`;
		case 'failed': {
			const why = recomputation.kind === 'failed' ? recomputation.why : '';
			return `The recomputation did not finish: ${closed(why)}${knownSoFar(enclosure)}`;
		}
		case 'no-solver': {
			const why = recomputation.kind === 'no-solver' ? recomputation.why : undefined;
			const because = why && why !== NO_SOLVER ? `: ${closed(why)}` : '.';
			return `No solver for this quantity${because} Only a person's reproduction can settle it.${knownSoFar(enclosure)}`;
		}
		default:
			if (!enclosure) return 'The recomputation gave no bound on this quantity.';
			if (reasonCode === 'not-settled') return notSettled(enclosure, input);
			if (reasonCode === 'within' || reasonCode === 'proved') return agreement(enclosure, input);
			return discrepancy(enclosure, input, reasonCode === 'last-digits');
	}
}

const closed = (text: string) => (/[.!?]$/.test(text.trim()) ? text.trim() : `${text.trim()}.`);

function range(enclosure: Enclosure): string {
	const { lower, upper } = enclosure;
	if (lower && upper && lower.equals(upper)) return `is ${showExact(lower)}`;
	const shown = showEnclosure(lower, upper);
	if (shown.lower === null) return `is at most ${shown.upper ?? ''}`;
	if (shown.upper === null) return `is at least ${shown.lower}`;
	return `lies between ${shown.lower} and ${shown.upper}`;
}

function knownSoFar(enclosure: Enclosure | null): string {
	return enclosure ? ` So far known: it ${range(enclosure)}.${worthOf(enclosure)}` : '';
}

/** What a statement rests on where that is less than a proof; with the person's name, if there is one. */
function worthOf({ worth, lower, upper, lowerLabel, upperLabel }: Enclosure): string {
	switch (worth) {
		case 'guaranteed':
			return '';
		case 'numerical':
			return ' This rests on numerical evidence, not on a proof.';
		case 'person': {
			const used = [lower ? lowerLabel : '', upper ? upperLabel : ''];
			const named = [...new Set(used.filter(isNamedReproduction))].join(' and ');
			return ` This rests on an accepted reproduction, not on a certificate of ours${named ? `: ${named}` : ''}.`;
		}
	}
}

function agreement(enclosure: Enclosure, input: ReasonInput): string {
	const { reading, relation } = input;
	const quantity = inSentence(input.quantity);
	const capital = quantity.charAt(0).toUpperCase() + quantity.slice(1);
	const worth = worthOf(enclosure);
	const fact = `${capital} ${range(enclosure)}`;
	if (relation !== '=') {
		const side = relation === '<=' ? 'upper' : 'lower';
		return `${fact}, so the claimed ${side} bound holds${howWell(enclosure, reading, relation)}.${worth}`;
	}
	if (reading.exact && isExact(enclosure)) return `${fact}, as claimed: proved.`;
	if (!reading.exact) return `${fact}, within what the printed digits allow.${worth}`;
	const relative = sizeOf(reading.value).equals(1) ? '' : ' of its size';
	return `${fact}, which is the claimed value to 1e-7${relative}.${worth}`;
}

/** A printed number has at most so many digits. */
const inFull = (printed: Rational) => finiteDecimal(printed, LONGEST_PRINTED) ?? showExact(printed);

/**
 * How well a claimed bound holds: with slack, as printed, or only because its last digit may have
 * been rounded. The last is said with both numbers, since the printed one by itself would not hold.
 */
function howWell(enclosure: Enclosure, reading: ReadInterval, relation: '<=' | '>='): string {
	const slack = slackOf(enclosure, { reading, relation });
	if (slack) return `, with a slack of ${showMoreThan(slack)}`;
	const { value } = reading;
	const known = relation === '<=' ? enclosure.upper : enclosure.lower;
	if (!known || (relation === '<=' ? known.compare(value) : value.compare(known)) <= 0) return '';
	if (reading.exact) return ` to 1e-7${sizeOf(value).equals(1) ? '' : ' of its size'}`;
	const printed = inFull(value);
	const end = inFull(relation === '<=' ? reading.high : reading.low);
	const stands = `${printed} stands for ${end} or ${relation === '<=' ? 'less' : 'more'}`;
	const beyond = distanceTo({ ...reading, low: value, high: value }, relation, enclosure);
	return beyond
		? ` to the digits printed (${stands}); exactly ${printed} is ${showMoreThan(beyond)} too ${relation === '<=' ? 'low' : 'high'}`
		: ` to the digits printed (${stands}); whether exactly ${printed} holds is not settled`;
}

/** By how much at least a claimed bound is looser than what is known; null when by nothing. */
export function slackOf(
	enclosure: Enclosure,
	input: Pick<ReasonInput, 'reading' | 'relation'>
): Rational | null {
	const { reading, relation } = input;
	const slack =
		relation === '<='
			? enclosure.upper && reading.low.sub(enclosure.upper)
			: relation === '>='
				? enclosure.lower && enclosure.lower.sub(reading.high)
				: null;
	return slack && slack.s > 0n && slack.n > 0n ? slack : null;
}

function discrepancy(enclosure: Enclosure, input: ReasonInput, lastDigits: boolean): string {
	const { reading, relation } = input;
	const quantity = inSentence(input.quantity);
	const distance = distanceTo(reading, relation, enclosure);
	const more = distance ? showMoreThan(distance) : '0';
	const above = enclosure.upper !== null && reading.low.compare(enclosure.upper) > 0;
	const where = `lies ${more} ${above ? 'above' : 'below'} ${boundName(enclosure, above)}`;
	const worth = worthOf(enclosure);
	if (lastDigits)
		return `The claimed value differs in the last digits, within usual solver tolerance: it ${where}.${worth}`;
	if (relation === '<=')
		return `The claimed upper bound ${where}, so ${quantity} is larger than claimed.${worth}`;
	if (relation === '>=')
		return `The claimed lower bound ${where}, so ${quantity} is smaller than claimed.${worth}`;
	const digits = reading.exact ? '' : ' to the digits printed';
	return `The claimed value ${where}, so it cannot be ${quantity}${digits}.${worth}`;
}

function boundName(enclosure: Enclosure, upper: boolean): string {
	const label = upper ? enclosure.upperLabel : enclosure.lowerLabel;
	const by = label ? ` (${label})` : '';
	if (isExact(enclosure) && enclosure.lower)
		return `the exact value ${showExact(enclosure.lower)}${by}`;
	if (enclosure.worth === 'guaranteed')
		return `the guaranteed ${upper ? 'upper' : 'lower'} bound${by}`;
	if (enclosure.worth === 'person')
		return `the ${upper ? 'upper' : 'lower'} end of the accepted reproduction`;
	return `the numerical ${upper ? 'upper' : 'lower'} bound${by}`;
}

function notSettled(enclosure: Enclosure, { reading, quantity }: ReasonInput): string {
	const fact = `${inSentence(quantity)} ${range(enclosure)}`;
	if (enclosure.lower === null || enclosure.upper === null)
		return `Consistent, not settled: ${fact}, and nothing is known on the other side.${worthOf(enclosure)}`;
	const precision = reading.exact ? 'the tolerance of 1e-7' : 'the printed precision';
	return `Consistent, not settled: ${fact}, which is wider than ${precision}.${worthOf(enclosure)}`;
}
