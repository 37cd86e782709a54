/**
 * A cache of so many answers; the oldest makes room.
 * @throws RangeError for a size below 1
 */
export class Recent<V> {
	readonly #known = new Map<string, V>();
	readonly #size: number;

	constructor(size: number) {
		if (!(size >= 1)) throw new RangeError(`a cache of ${size} holds nothing`);
		this.#size = size;
	}

	get(key: string): V | undefined {
		return this.#known.get(key);
	}

	/** Keeps an answer and returns it. */
	keep(key: string, value: V): V {
		const [oldest] = this.#known.keys();
		if (oldest !== undefined && this.#known.size >= this.#size) this.#known.delete(oldest);
		this.#known.set(key, value);
		return value;
	}
}
