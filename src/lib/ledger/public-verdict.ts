import { withoutName } from './reproductions';
import type { Verdict } from './verdict';

/**
 * A verdict as everybody may read it: what was reproduced, but not by whom, and nothing of the
 * group's submissions. Fields are listed, not taken away: what is added later stays private.
 */
export function publicVerdict(verdict: Verdict): Verdict {
	const { status, reasonCode, reason, publicReason, reading, enclosure, slack, diagnosis } =
		verdict;
	return {
		status,
		reasonCode,
		reason: publicReason ?? reason,
		reading,
		enclosure: enclosure && {
			lower: enclosure.lower,
			upper: enclosure.upper,
			exact: enclosure.exact,
			worth: enclosure.worth,
			lowerLabel: withoutName(enclosure.lowerLabel),
			upperLabel: withoutName(enclosure.upperLabel)
		},
		...(slack === undefined ? {} : { slack }),
		diagnosis
	};
}
