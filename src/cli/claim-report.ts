import type { Verdict } from '../lib/ledger/verdict';
import type { JudgedClaim } from './judge-claim';

/** Decimals of at most 15 digits, as JSON numbers: they read back to the same decimal. */
const number = (decimal: string | null) => (decimal === null ? null : Number(decimal));

/** A verdict in the problem format's words. */
export function printableVerdict({
	status,
	reason,
	reasonCode,
	reading,
	enclosure,
	slack,
	diagnosis
}: Verdict) {
	const { printed, low, high, exact, text } = reading;
	return {
		status,
		reason,
		reasonCode,
		reading: { printed, low: number(low), high: number(high), exact, text },
		enclosure: enclosure && {
			...enclosure,
			lower: number(enclosure.lower),
			upper: number(enclosure.upper)
		},
		...(slack ? { slack } : {}),
		diagnosis
	};
}

/** What was computed, and the other quantities it was compared with. */
export function printableComputation({ result, others }: JudgedClaim) {
	const shown = others.map(({ label, quantity, fields, lower, upper }) => ({
		label,
		quantity,
		fields,
		lower: lower?.valueOf() ?? null,
		upper: upper?.valueOf() ?? null
	}));
	return { others: shown, result };
}
