/** `1 row`, `1,275 moments`. */
export const counted = (count: number, one: string, many = `${one}s`) =>
	`${count.toLocaleString('en')} ${count === 1 ? one : many}`;

/** `9 × 9, its lower triangle: 45 numbers`. */
export const triangle = (size: number) =>
	`${size} × ${size}, its lower triangle: ${counted((size * (size + 1)) / 2, 'number')}`;

/** How many entries a record of named numbers has. */
export const entries = (record: Readonly<Record<string, unknown>>) =>
	counted(Object.keys(record).length, 'entry', 'entries');
