/** CPU time, interleaved: what else the machine does then falls on all contenders alike. */

/** A sample repeats what is faster than this, so that the clock's steps don't count. */
export const SHORTEST_SAMPLE = 50;
export const MOST_REPEATS = 200;

/** CPU time spent on each contender before anything counts: compilers settle within it. */
const WARM_UP = 700;

/** One way to do a piece of work; the sample is milliseconds of CPU for one time. */
export interface Contender {
	readonly name: string;
	/** @param repeats times the work is done; the sample is their mean. */
	sample(repeats: number): Promise<number>;
}

/** Milliseconds of this process's CPU time. */
export function cpuTime(): number {
	const { user, system } = process.cpuUsage();
	return (user + system) / 1000;
}

/** A contender of this process. */
export function inProcess(name: string, run: () => unknown): Contender {
	return {
		name,
		async sample(repeats) {
			const start = cpuTime();
			for (let k = 0; k < repeats; k++) await run();
			return (cpuTime() - start) / repeats;
		}
	};
}

export function median(values: readonly number[]): number {
	const sorted = values.toSorted((a, b) => a - b);
	const middle = Math.floor(sorted.length / 2);
	const upper = sorted[middle] ?? NaN;
	return sorted.length % 2 === 1 ? upper : (upper + (sorted[middle - 1] ?? NaN)) / 2;
}

function repeatsFor(once: number): number {
	return Math.min(MOST_REPEATS, Math.ceil(SHORTEST_SAMPLE / Math.max(once, 0.01)));
}

/**
 * Median milliseconds by contender's name: every contender once per round, warmed up unless there is
 * one round only.
 */
export async function measureAll(
	contenders: readonly Contender[],
	rounds: number
): Promise<Map<string, number>> {
	const repeats = new Map<string, number>();
	const samples = new Map(contenders.map(({ name }) => [name, [] as number[]]));
	for (const { name, sample } of contenders) {
		if (rounds === 1) continue;
		let once = await sample(1);
		for (let spent = once, times = 2; spent < WARM_UP; times = repeatsFor(once)) {
			once = await sample(times);
			spent += times * Math.max(once, SHORTEST_SAMPLE / MOST_REPEATS);
		}
		repeats.set(name, repeatsFor(once));
	}
	for (let round = 0; round < rounds; round++)
		for (const { name, sample } of contenders)
			samples.get(name)?.push(await sample(repeats.get(name) ?? 1));
	return new Map([...samples].map(([name, values]) => [name, median(values)]));
}
