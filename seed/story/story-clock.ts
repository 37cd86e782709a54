/** A clock that the seed sets back, so that the demo's past lies in the past; it runs meanwhile. */
export interface StoryClock {
	now(): Date;
	/** Some days ago at an hour of the day, UTC; an hour that is still to come is one day earlier. */
	set(daysAgo: number, hour?: number): void;
	setToNow(): void;
}

const DAY_MS = 86_400_000;
const HOUR_MS = 3_600_000;
/** When the invented group meets. */
const MEETING = 15;

export function storyClock(): StoryClock {
	let offset = 0;
	return {
		now: () => new Date(Date.now() + offset),
		set(daysAgo, hour = MEETING) {
			const real = Date.now();
			const day = Math.floor(real / DAY_MS) - daysAgo;
			const time = day * DAY_MS + hour * HOUR_MS;
			offset = (time < real ? time : time - DAY_MS) - real;
		},
		setToNow() {
			offset = 0;
		}
	};
}

/** `YYYY-MM-DD` so many days from today; negative ones lie in the past. */
export function dayFromToday(days: number): string {
	return new Date(Date.now() + days * DAY_MS).toISOString().slice(0, 10);
}
