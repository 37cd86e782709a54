import { oneLine } from '../../../ledger/one-line';
import { NO_SOLVER } from '../../../ledger/judgement';
import { QUANTITIES, type QuantityInfo, type QuantityKey } from '../../../ledger/quantities';
import type { Level, Problem } from '../../../nonlocality/problem';
import type { FieldIssue } from '../../errors';
import {
	QUANTUM_GAP,
	SEE_SAW_STARTS,
	almostQuantumLevel,
	lackingMoments,
	problemBase,
	type ProblemSubjectData
} from './station-problems';

/** What of a claim's form says which quantity it is about. */
export interface QuantityChoice {
	readonly quantity: QuantityKey;
	readonly sense: 'max' | 'min';
	readonly level: string;
	readonly nonNegative: boolean;
	readonly dimension: string;
}

export function quantityInfo(key: QuantityKey): QuantityInfo {
	const info = QUANTITIES.find((quantity) => quantity.key === key);
	if (!info) throw new RangeError(`no quantity ${key}`);
	return info;
}

/** The rule shows maxima of a functional: a minimum is of other sets' other ends. */
export function isOnRule({ quantity, sense }: Pick<QuantityChoice, 'quantity' | 'sense'>): boolean {
	return sense === 'max' && quantityInfo(quantity).subject === 'functional';
}

const HIGHEST_LEVEL = 5;
const LARGEST_DIMENSION = 20;

/** `1`, `2` ..., `1+AB`, `1 per party`; or what is wrong with it. */
export function readLevel(text: string): { level: Level; label: string } | FieldIssue {
	const plain = oneLine(text);
	if (/^1 ?\+ ?AB$/i.test(plain)) return { level: '1+AB', label: 'level 1+AB' };
	const perParty = /^([1-9]) per party$/i.exec(plain);
	if (perParty) {
		const k = Number(perParty[1]);
		return { level: { perParty: k }, label: `${k} per party` };
	}
	const number = /^\d{1,3}$/.test(plain) ? Number(plain) : NaN;
	if (number >= 1 && number <= HIGHEST_LEVEL) return { level: number, label: `level ${number}` };
	return {
		field: 'level',
		message: plain
			? `Give the level as 1 to ${HIGHEST_LEVEL}, 1+AB, or 1 per party.`
			: 'Give the level of the relaxation: 1, 1+AB, 2 or 3.'
	};
}

function readDimension(text: string): number | FieldIssue {
	const value = /^\d{1,4}$/.test(text.trim()) ? Number(text.trim()) : NaN;
	if (value >= 1 && value <= LARGEST_DIMENSION) return value;
	return {
		field: 'dimension',
		message: `Give the local dimension as a whole number from 1 to ${LARGEST_DIMENSION}.`
	};
}

export interface QuantityReading {
	/** `Quantum maximum`, `NPA bound, level 2, P ≥ 0`. */
	readonly label: string;
	readonly issues: readonly FieldIssue[];
	/** Null when a parameter is missing. */
	readonly level: Level | null;
	readonly dimension: number | null;
}

/** The quantity with its parameters, in words, and what is wrong with them. */
export function readQuantity(choice: QuantityChoice): QuantityReading {
	const info = quantityInfo(choice.quantity);
	const issues: FieldIssue[] = [];
	let level: Level | null = null;
	let dimension: number | null = null;
	const minimum = choice.sense === 'min' && info.parameters.includes('sense');
	const parts = [
		minimum ? info.label.replace(/maximum|bound/i, (word) => minimised(word)) : info.label
	];
	if (info.parameters.includes('level')) {
		const read = readLevel(choice.level);
		if ('field' in read) issues.push(read);
		else {
			level = read.level;
			parts.push(read.label);
		}
		if (choice.nonNegative) parts.push('P ≥ 0');
	}
	if (info.parameters.includes('dimension')) {
		const read = readDimension(choice.dimension);
		if (typeof read !== 'number') issues.push(read);
		else {
			dimension = read;
			if (choice.quantity === 'quantum-dimension') parts[0] = `${parts[0]} = ${read}`;
			else parts.push(`dimension ${read}`);
		}
	}
	return { label: parts.join(', '), issues, level, dimension };
}

function minimised(word: string): string {
	if (word.toLowerCase() === 'bound') return `${word} on the minimum`;
	return word.startsWith('M') ? 'Minimum' : 'minimum';
}

/**
 * The problem that recomputes a claimed quantity on a representative, or why none does.
 * @param seconds budget of computing time
 */
export function claimProblem(
	choice: QuantityChoice,
	reading: QuantityReading,
	subject: ProblemSubjectData,
	seconds: number
): { readonly problem: Problem } | { readonly why: string } {
	const found = quantityProblem(choice, reading, subject, seconds);
	const lacking = 'problem' in found ? lackingMoments(found.problem) : null;
	return lacking === null ? found : { why: lacking };
}

/**
 * The claimed quantity as a problem, also where solving it would be in vain: what others prove of
 * nested sets is compared with it.
 */
export function quantityProblem(
	choice: QuantityChoice,
	reading: QuantityReading,
	subject: ProblemSubjectData,
	seconds: number
): { readonly problem: Problem } | { readonly why: string } {
	const info = quantityInfo(choice.quantity);
	const base = problemBase(subject, seconds, choice.sense);
	const parties = subject.outputs.length;
	switch (info.solver) {
		case null:
			return { why: NO_SOLVER };
		case 'local':
			return { problem: { ...base, quantity: 'local' } };
		case 'no-signalling':
			return { problem: { ...base, quantity: 'no-signalling' } };
		case 'hybrid': {
			const model = choice.quantity === 'hybrid' ? 'svetlichny' : 'no-signalling';
			if (parties < 3) return { why: 'a hybrid maximum needs three parties or more' };
			return { problem: { ...base, quantity: 'hybrid', model } };
		}
		case 'quantum':
			return {
				problem: { ...base, quantity: 'quantum', levels: null, dimensions: null, gap: QUANTUM_GAP }
			};
		case 'npa':
			return npaProblem(choice, reading, base, parties);
		case 'see-saw': {
			const { dimension } = reading;
			if (dimension === null) return { why: 'the dimension is not given' };
			return {
				problem: {
					...base,
					quantity: 'see-saw',
					dimension: subject.outputs.map(() => dimension),
					starts: SEE_SAW_STARTS,
					state: choice.quantity === 'maximally-entangled' ? 'maximally-entangled' : 'free'
				}
			};
		}
	}
}

function npaProblem(
	{ quantity, nonNegative }: QuantityChoice,
	{ level }: QuantityReading,
	base: ReturnType<typeof problemBase>,
	parties: number
): { readonly problem: Problem } | { readonly why: string } {
	if (quantity === 'almost-quantum') {
		const level = almostQuantumLevel(parties);
		return { problem: { ...base, quantity: 'npa', level, nonNegative: false } };
	}
	if (quantity === 'macroscopic-locality') {
		if (parties !== 2) return { why: 'macroscopic locality is defined for two parties here' };
		return { problem: { ...base, quantity: 'npa', level: 1, nonNegative: true } };
	}
	if (level === null) return { why: 'the level is not given' };
	if (level === '1+AB' && parties !== 2) {
		return { why: 'level 1+AB is for two parties; take 1 per party' };
	}
	return { problem: { ...base, quantity: 'npa', level, nonNegative } };
}
