/** A clock that the seed sets back, so that the demo's past lies in the past; it runs meanwhile. */
export interface StoryClock {
	now(): Date;
	/** @param daysAgo fractions are hours: 1.5 is noon of the day before, give or take */
	set(daysAgo: number): void;
}

const DAY_MS = 86_400_000;

export function storyClock(): StoryClock {
	let offset = 0;
	return {
		now: () => new Date(Date.now() + offset),
		set(daysAgo) {
			offset = -daysAgo * DAY_MS;
		}
	};
}

/** `YYYY-MM-DD` so many days from today; negative ones lie in the past. */
export function dayFromToday(days: number): string {
	return new Date(Date.now() + days * DAY_MS).toISOString().slice(0, 10);
}
