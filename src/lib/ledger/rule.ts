import type { VerdictStatus } from './claim';
import { describeRule, quantumFigures, stationFigure } from './rule-text';

/** Values on the rule, in one normalisation; null: not known (or not drawn). */
export interface RuleInput {
	readonly local: number | null;
	readonly quantumLower: number | null;
	readonly quantumUpper: number | null;
	readonly almostQuantum: number | null;
	readonly noSignalling: number | null;
	readonly claimed: {
		readonly low: number;
		readonly high: number;
		readonly printed: string;
	} | null;
	readonly status: VerdictStatus | null;
	/** Where the claimed quantity lies by the verdict; left out, the quantum values. */
	readonly admissible?: { readonly lower: number | null; readonly upper: number | null };
}

export const STATION_KEYS = ['local', 'quantum', 'almost-quantum', 'no-signalling'] as const;
export type StationKey = (typeof STATION_KEYS)[number];

export interface RuleStation {
	readonly key: StationKey;
	/** Of a block, its ends; for a mark both are the same. Places from 0 to 1. */
	readonly from: number;
	readonly to: number;
	readonly label: string;
	/** Figures under it: `0.250852 ... 0.250940`. */
	readonly figures: string;
	/** It has the value of the station before it and stands at the same place. */
	readonly coincides: boolean;
}

export interface RuleLayout {
	readonly stations: readonly RuleStation[];
	readonly claim: {
		readonly x: number;
		readonly printed: string;
		/** The claim lies beyond this end of the line and is drawn at it. */
		readonly beyond: 'left' | 'right' | null;
	} | null;
	/** From the claim to the nearest admissible value, on a discrepancy. */
	readonly dashed: { readonly from: number; readonly to: number } | null;
	/** The same in words. */
	readonly text: string;
}

/** Fixed places, so that rows can be compared by eye. */
export const PLACES = {
	local: 0.3,
	quantumLower: 0.54,
	quantumUpper: 0.57,
	almostQuantum: 0.76,
	noSignalling: 0.95
} as const;

const LABELS: Readonly<Record<StationKey, string>> = {
	local: 'local',
	quantum: 'quantum',
	'almost-quantum': 'almost quantum',
	'no-signalling': 'no-signalling'
};

/** Values closer than this (relative above 1) stand at one place: a solver's last digits. */
const COINCIDENT = 1e-7;

/** A known value and its place; both rise along the line. */
interface Anchor {
	readonly value: number;
	readonly x: number;
}

export function layOutRule(input: RuleInput): RuleLayout {
	const sign = isDescending(input) ? -1 : 1;
	const anchors = anchorsOf(input, sign);
	const stations = stationsOf(input, anchors, sign);
	const claim = input.claimed && placeClaim(input.claimed, anchors, sign);
	const nearest = nearestAdmissible(input);
	const target = nearest === null ? null : place(sign * nearest, anchors).x;
	const dashed =
		claim && target !== null && input.status === 'discrepancy'
			? { from: claim.x, to: target }
			: null;
	return { stations, claim, dashed, text: describeRule(input, stations, nearest) };
}

/** A minimum's sets nest downwards: the line then runs the other way. */
function isDescending(input: RuleInput): boolean {
	const inner = input.local ?? input.quantumLower;
	const outer = input.noSignalling ?? input.almostQuantum ?? input.quantumUpper;
	return inner !== null && outer !== null && outer < inner;
}

function quantumEnds(input: RuleInput, sign: number): [number | null, number | null] {
	return sign > 0
		? [input.quantumLower, input.quantumUpper]
		: [input.quantumUpper, input.quantumLower];
}

function close(a: number, b: number): boolean {
	return Math.abs(a - b) <= COINCIDENT * Math.max(1, Math.abs(a), Math.abs(b));
}

function anchorsOf(input: RuleInput, sign: number): Anchor[] {
	const [inner, outer] = quantumEnds(input, sign);
	const known: readonly (readonly [number | null, number])[] = [
		[input.local, PLACES.local],
		[inner, PLACES.quantumLower],
		[outer, PLACES.quantumUpper],
		[input.almostQuantum, PLACES.almostQuantum],
		[input.noSignalling, PLACES.noSignalling]
	];
	const anchors: Anchor[] = [];
	for (const [value, x] of known) {
		if (value === null || !Number.isFinite(value)) continue;
		const before = anchors.at(-1);
		// Coinciding stations share the first one's place; so does one out of order by rounding.
		if (before && (close(sign * value, before.value) || sign * value < before.value)) continue;
		anchors.push({ value: sign * value, x });
	}
	return anchors;
}

/** Linear between two anchors; before the first along the local bar, beyond the last at the end. */
function place(
	value: number,
	anchors: readonly Anchor[]
): { x: number; beyond: 'left' | 'right' | null } {
	const first = anchors[0];
	const last = anchors.at(-1);
	if (!first || !last) return { x: 0.5, beyond: null };
	if (value < first.value && !close(value, first.value)) {
		const span =
			last.value > first.value ? last.value - first.value : Math.max(1, Math.abs(first.value));
		const x = first.x * (1 - (first.value - value) / span);
		return x >= 0 ? { x, beyond: null } : { x: 0, beyond: 'left' };
	}
	if (value > last.value && !close(value, last.value)) return { x: 1, beyond: 'right' };
	for (let i = 1; i < anchors.length; i++) {
		const [a, b] = [anchors[i - 1], anchors[i]];
		if (!a || !b || value > b.value) continue;
		const share = Math.max(0, (value - a.value) / (b.value - a.value));
		return { x: a.x + share * (b.x - a.x), beyond: null };
	}
	return { x: last.x, beyond: null };
}

function placeClaim(
	claimed: NonNullable<RuleInput['claimed']>,
	anchors: readonly Anchor[],
	sign: number
): NonNullable<RuleLayout['claim']> {
	const middle = claimed.low + (claimed.high - claimed.low) / 2;
	return { ...place(sign * middle, anchors), printed: claimed.printed };
}

function nearestAdmissible(input: RuleInput): number | null {
	if (!input.claimed) return null;
	const lower = input.admissible ? input.admissible.lower : input.quantumLower;
	const upper = input.admissible ? input.admissible.upper : input.quantumUpper;
	if (upper !== null && input.claimed.low > upper) return upper;
	return lower !== null && input.claimed.high < lower ? lower : null;
}

function stationsOf(input: RuleInput, anchors: readonly Anchor[], sign: number): RuleStation[] {
	const stations: RuleStation[] = [];
	const add = (key: StationKey, ends: readonly (number | null)[], figures: string) => {
		const known = ends.filter((end) => end !== null);
		const [inner, outer] = [known[0], known.at(-1)];
		if (inner === undefined || outer === undefined) return;
		const from = key === 'local' ? 0 : place(sign * inner, anchors).x;
		const to = place(sign * outer, anchors).x;
		const coincides = stations.some((before) => before.to === to && key !== 'local');
		stations.push({ key, from, to, label: LABELS[key], figures, coincides });
	};
	const [lower, upper] = [input.quantumLower, input.quantumUpper];
	const side = sign > 0 ? 'upper' : 'lower';
	add('local', [input.local], stationFigure(input.local, side));
	add('quantum', quantumEnds(input, sign), quantumFigures(lower, upper));
	add('almost-quantum', [input.almostQuantum], stationFigure(input.almostQuantum, side));
	add('no-signalling', [input.noSignalling], stationFigure(input.noSignalling, side));
	return stations;
}
