/** CPU time, interleaved: what else the machine does then falls on all contenders alike. */

/** A sample repeats what is faster than this, so that the clock's steps don't count. */
export const SHORTEST_SAMPLE = 50;
export const MOST_REPEATS = 200;

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

/** A contender of this process; `before` is not measured. */
export function inProcess(name: string, run: () => unknown, before?: () => void): Contender {
	return {
		name,
		async sample(repeats) {
			let spent = 0;
			for (let k = 0; k < repeats; k++) {
				before?.();
				const start = cpuTime();
				await run();
				spent += cpuTime() - start;
			}
			return spent / repeats;
		}
	};
}

export function median(values: readonly number[]): number {
	const sorted = values.toSorted((a, b) => a - b);
	const middle = Math.floor(sorted.length / 2);
	const upper = sorted[middle] ?? NaN;
	return sorted.length % 2 === 1 ? upper : (upper + (sorted[middle - 1] ?? NaN)) / 2;
}

/**
 * Median milliseconds by contender's name: every contender once per round, after two samples that
 * warm it up (none when there is one round only, and none after the first that was long).
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
		if (once < 20 * SHORTEST_SAMPLE) once = await sample(3);
		repeats.set(name, Math.min(MOST_REPEATS, Math.ceil(SHORTEST_SAMPLE / Math.max(once, 0.01))));
	}
	for (let round = 0; round < rounds; round++)
		for (const { name, sample } of contenders)
			samples.get(name)?.push(await sample(repeats.get(name) ?? 1));
	return new Map([...samples].map(([name, values]) => [name, median(values)]));
}
