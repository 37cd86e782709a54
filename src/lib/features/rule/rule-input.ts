import type { VerdictStatus } from '../../ledger/claim';
import { withMinusSign } from '../../ledger/figures';
import type { RuleInput, RuleLayout, RuleStation } from '../../ledger/rule';
import type { StationsView } from '../../schemas/views';
import { shownBetween } from '../digits/shown-between';

const number = (text: string | null | undefined): number | null => {
	if (text == null || text === '') return null;
	const value = Number(text);
	if (Number.isFinite(value)) return value;
	// Exact values come as fractions, `4/3`, or with their decimal, `4/3 = 1.333…`.
	const [numerator, denominator] = (text.split('=')[0] ?? '').split('/').map(Number);
	const quotient = (numerator ?? NaN) / (denominator ?? NaN);
	return Number.isFinite(quotient) ? quotient : null;
};

export interface ShownOnRule {
	readonly stations: StationsView;
	/** Ends of what the printed value stands for. */
	readonly claimed?: { readonly low: string; readonly high: string } | null;
	readonly printed?: string;
	readonly status?: VerdictStatus | null;
	/** Where the claimed quantity lies by the recomputation. */
	readonly admissible?: { readonly lower: string | null; readonly upper: string | null } | null;
}

/** Decimal strings of the views as the numbers a drawing needs. */
export function ruleInput(shown: ShownOnRule): RuleInput {
	const { stations, claimed, admissible } = shown;
	const low = number(claimed?.low);
	const high = number(claimed?.high);
	return {
		local: number(stations.local),
		quantumLower: number(stations.quantumLower),
		quantumUpper: number(stations.quantumUpper),
		almostQuantum: number(stations.almostQuantum),
		noSignalling: number(stations.noSignalling),
		claimed: low === null || high === null ? null : { low, high, printed: shown.printed ?? '' },
		status: shown.status ?? null,
		...(admissible
			? { admissible: { lower: number(admissible.lower), upper: number(admissible.upper) } }
			: {})
	};
}

export interface StationLabel {
	readonly at: number;
	readonly label: string;
	readonly figures: string;
	readonly anchor: 'start' | 'middle' | 'end';
	/** Rows of texts under the line; a label that would lie on another one stands a row lower. */
	readonly row: number;
}

/** Near an end a text hangs on that end instead of its middle. */
function anchorAt(x: number): StationLabel['anchor'] {
	return x < 0.1 ? 'start' : x > 0.96 ? 'end' : 'middle';
}

const middleOf = (station: RuleStation) =>
	station.key === 'local' ? station.to : (station.from + station.to) / 2;

const SHOWN_AS = {
	local: 'local',
	'almost-quantum': 'almostQuantum',
	'no-signalling': 'noSignalling'
} as const;

/**
 * Under the quantum block stand the digits both its sides share, when those are enough; an exact
 * value that is shown as a fraction, `1/3`, is one here too.
 */
function figuresOf({ key, figures }: RuleStation, view: StationsView) {
	if (key === 'quantum') {
		return withMinusSign(shownBetween(view.quantumLower, view.quantumUpper) ?? '');
	}
	const shown = view[SHOWN_AS[key]];
	return shown?.includes('/') ? withMinusSign(shown) : figures;
}

/** Stations nearer than this have one value, up to a solver's last digits. */
const SAME_PLACE = 0.03;

/** The narrowest line with texts under it, in pixels; below they stand in a list. */
const NARROWEST = 672;
/** Widths of a letter and of a figure at 13 px, on the wide side, and the gap between two texts. */
const LETTER = 6.6;
const FIGURE = 8;
const GAP = 8;

/** One label per place: stations of the same value share it. */
export function stationLabels(
	{ stations }: RuleLayout,
	view: StationsView
): readonly StationLabel[] {
	const places: { at: number; to: number; names: string[]; figures: string }[] = [];
	for (const station of stations) {
		const { to, label } = station;
		const same = places.find((place) => Math.abs(place.to - to) < SAME_PLACE);
		if (same) same.names.push(label);
		else
			places.push({
				at: middleOf(station),
				to,
				names: [label],
				figures: figuresOf(station, view)
			});
	}
	const reach: number[] = [];
	return places.map(({ at, names, figures }) => {
		const label = names.join(', ');
		const anchor = anchorAt(at);
		const width = Math.max(label.length * LETTER, figures.length * FIGURE);
		const start = at * NARROWEST - (anchor === 'middle' ? width / 2 : anchor === 'end' ? width : 0);
		const free = reach.findIndex((end) => end + GAP <= start);
		const row = free === -1 ? reach.length : free;
		reach[row] = start + width;
		return { at, label, figures, anchor, row };
	});
}
